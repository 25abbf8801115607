import type { CreatePhase, GrowthPhase, PatchPhase } from '../../../shared/contract/phases.ts';
import { toInstant } from '../../services/clock.ts';
import type { PhaseRow } from './phases.queries.ts';

export function toPhase(row: PhaseRow, editable: boolean): GrowthPhase {
  const { createdAtMs, updatedAtMs, deletedAtMs: _deletedAtMs, createdById: _createdById, ...facts } = row;
  return { ...facts, editable, createdAt: toInstant(createdAtMs), updatedAt: toInstant(updatedAtMs) };
}

interface Stamps {
  id: string;
  runId: string;
  createdById: string;
  nowMs: number;
  isSoundOpen: boolean;
}

export function toNewPhaseRow(input: CreatePhase, { nowMs, ...stamps }: Stamps): PhaseRow {
  const times = { createdAtMs: nowMs, updatedAtMs: nowMs, deletedAtMs: null };
  return { ...input, ...stamps, ...times, revision: 1 };
}

/** The row as it would be after the change; what the change does not name stays. */
export function withPhaseChange(row: PhaseRow, change: PatchPhase): PhaseRow {
  const given = Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined));
  return { ...row, ...given };
}

/** Whether a second PUT asks for what is stored already, so that a retry can be answered like the first try. */
export function isSamePhase(row: PhaseRow, input: CreatePhase): boolean {
  const stored: Record<string, unknown> = { ...row };
  return Object.entries(input).every(([key, value]) => stored[key] === value);
}
