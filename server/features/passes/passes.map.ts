import type { Pass } from '../../../shared/contract/passes.ts';
import { toInstant } from '../../services/clock.ts';
import type { PassWithContext } from './passes.queries.ts';

export function toPass(view: PassWithContext): Pass {
  const { pass } = view;
  return {
    id: pass.id,
    recordingId: pass.recordingId,
    recordingName: view.fileName,
    runTitle: view.runTitle,
    durationS: view.frames / view.sampleRateHz,
    labelerId: pass.labelerId,
    labelerName: view.labelerName,
    blind: pass.blind,
    state: pass.state,
    dueAt: pass.dueAtMs === null ? null : toInstant(pass.dueAtMs),
    instructions: pass.instructions,
    schemeVersion: pass.schemeVersion,
    eventCount: view.eventCount,
    createdAt: toInstant(pass.createdAtMs),
    finishedAt: pass.finishedAtMs === null ? null : toInstant(pass.finishedAtMs),
  };
}
