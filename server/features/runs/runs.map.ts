import type { Run, SaveRun } from '../../../shared/contract/runs.ts';
import { toInstant } from '../../services/clock.ts';
import type { RunValues, RunView } from './runs.queries.ts';

export function toRun({ run, labName, recordingCount }: RunView, editable: boolean): Run {
  const { startedAtMs, createdAtMs, createdById: _createdById, updatedAtMs: _updatedAtMs, ...facts } = run;
  return {
    ...facts,
    labName,
    recordingCount,
    editable,
    startedAt: startedAtMs === null ? null : toInstant(startedAtMs),
    createdAt: toInstant(createdAtMs),
  };
}

/** The columns that a person's input decides; the lab is not one of them once a run exists. */
export function toRunValues({ labId: _labId, startedAt, ...facts }: SaveRun): RunValues {
  return { ...facts, startedAtMs: startedAt === null ? null : Date.parse(startedAt) };
}
