import type { Pass } from '../../../shared/contract/passes.ts';
import { likelyMinutes } from '../../../shared/domain/pass-effort.ts';
import { partOfPass } from '../../../shared/domain/pass-windows.ts';
import { samplesIn } from '../../../shared/domain/span-set.ts';
import { toInstant } from '../../services/clock.ts';
import type { PassWithContext } from './passes.queries.ts';

/** `isWithheld` where the asking person works blind on the recording in another pass than this one. */
export function toPass(view: PassWithContext, isWithheld: boolean): Pass {
  const { pass } = view;
  const { id, recordingId, labelerId, task, kind, windows, windowSeed, roundOrder, blind, state } = pass;
  return {
    ...{ id, recordingId, labelerId, task, kind, windows, windowSeed, roundOrder, blind, state },
    recordingName: view.fileName,
    runTitle: view.runTitle,
    durationS: view.frames / view.sampleRateHz,
    labelerName: view.labelerName,
    dueAt: pass.dueAtMs === null ? null : toInstant(pass.dueAtMs),
    instructions: pass.instructions,
    schemeVersion: pass.schemeVersion,
    likelyMinutes: isWithheld ? null : minutesOf(view),
    eventCount: isWithheld ? null : view.eventCount,
    createdAt: toInstant(pass.createdAtMs),
    finishedAt: pass.finishedAtMs === null ? null : toInstant(pass.finishedAtMs),
    remark: isWithheld ? null : pass.remark,
    coverage: isWithheld ? null : pass.coverage,
  };
}

export function minutesOf({
  pass: { task, kind, windows },
  frames,
  sampleRateHz,
  channels,
  candidateCount,
}: Pick<PassWithContext, 'pass' | 'frames' | 'sampleRateHz' | 'channels' | 'candidateCount'>): number | null {
  const partS = samplesIn(partOfPass(windows, frames)) / sampleRateHz;
  return likelyMinutes({
    ...{ task, kind, partS, channels },
    windows: windows?.length ?? 0,
    candidates: kind === 'rounds' ? candidateCount : null,
  });
}
