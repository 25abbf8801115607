import type { RecordingEvent } from '@shared/contract/events.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import type { MarkPlace } from '@/composables/outbox/outbox-entry.ts';

export const crack: MarkFields = {
  channel: 0,
  startSample: 100,
  endSample: 200,
  lowHz: null,
  highHz: null,
  classKey: 'crack',
  confidence: 'sure',
  note: '',
  origin: 'hand',
  candidateId: null,
  rawStartSample: null,
  uncertaintySamples: null,
  aids: null,
  view: null,
};

export const place: MarkPlace = {
  personId: 'ann',
  recordingId: 'r',
  passId: 'p',
  title: 'Droplet 7',
  sampleRateHz: 192_000,
};

export function eventOf(
  id: string,
  revision: number,
  mark: MarkFields,
  passId = place.passId,
): RecordingEvent {
  const at = '2026-01-01T00:00:00.000Z';
  const facts = { recordingId: 'r', passId, createdById: 'ann', createdAt: at, updatedAt: at };
  return { ...mark, ...facts, id, revision, parameters: null };
}
