import { isDeepStrictEqual } from 'node:util';
import type { CreateEvent, PatchEvent, RecordingEvent } from '../../../shared/contract/events.ts';
import type { BurstParameters } from '../../../shared/contract/measurement.ts';
import { toInstant } from '../../services/clock.ts';
import type { EventRow } from './events.queries.ts';

export function toEvent(row: EventRow): RecordingEvent {
  const { createdAtMs, updatedAtMs, deletedAtMs: _deleted, ...rest } = row;
  return {
    ...rest,
    parameters: row.parameters ?? null,
    createdAt: toInstant(createdAtMs),
    updatedAt: toInstant(updatedAtMs),
  };
}

interface Stamps {
  id: string;
  recordingId: string;
  createdById: string;
  nowMs: number;
  parameters: BurstParameters | null;
}

export function toNewRow(input: CreateEvent, { nowMs, ...stamps }: Stamps): EventRow {
  const {
    channel,
    startSample,
    endSample,
    lowHz,
    highHz,
    classKey,
    confidence,
    note,
    passId,
    origin,
    candidateId,
    rawStartSample,
    uncertaintySamples,
    aids,
    view,
  } = input;
  const mark = { channel, startSample, endSample, lowHz, highHz, classKey, confidence, note };
  const times = { createdAtMs: nowMs, updatedAtMs: nowMs, deletedAtMs: null };
  const circumstances = { rawStartSample, uncertaintySamples, aids, view };
  return { ...mark, passId, origin, candidateId, ...circumstances, ...stamps, ...times, revision: 1 };
}

/** The row as it would be after the change; what the change does not name stays. */
export function withChange(row: EventRow, change: PatchEvent): EventRow {
  const given = Object.fromEntries(Object.entries(change).filter(([, value]) => value !== undefined));
  return { ...row, ...given };
}

/** Whether a second PUT asks for what is stored already, so that a retry can be answered like the first try. */
export function isSameMark(row: EventRow, input: CreateEvent): boolean {
  const stored = toEvent(row) as unknown as Record<string, unknown>;
  return Object.entries(input).every(([key, value]) => isDeepStrictEqual(stored[key], value));
}
