import type { EventOrigin, RecordingEvent } from '@shared/contract/events.ts';
import type { BurstParameters } from '@shared/contract/measurement.ts';
import type { ListeningAids, MarkView } from '@shared/contract/mark-circumstances.ts';
import type { Confidence } from '@shared/contract/schemes.ts';

/** What a person says about a span; everything of a mark that can be changed, undone and done again. */
export interface MarkFields {
  channel: number;
  startSample: number;
  /** Exclusive. */
  endSample: number;
  lowHz: number | null;
  highHz: number | null;
  classKey: string;
  confidence: Confidence;
  note: string;
  origin: EventOrigin;
  candidateId: string | null;
  /** Where the person had put the start, before it was moved to a picked onset. */
  rawStartSample: number | null;
  /** How far off the start may be. */
  uncertaintySamples: number | null;
  aids: ListeningAids | null;
  view: MarkView | null;
}

/** A mark on the bench. `key` stays the same while the page lives, also where undoing gives the mark a new id. */
export interface BenchMark extends MarkFields {
  key: string;
  passId: string;
  /** Set in the open pass of this person, so that it can be changed. */
  isOwn: boolean;
  /** Measured by the server when the mark was stored; `null` until then. */
  parameters: BurstParameters | null;
}

const FIELDS = [
  'channel',
  'startSample',
  'endSample',
  'lowHz',
  'highHz',
  'classKey',
  'confidence',
  'note',
  'origin',
  'candidateId',
  'rawStartSample',
  'uncertaintySamples',
  'aids',
  'view',
] as const satisfies readonly (keyof MarkFields)[];

export function fieldsOf(mark: MarkFields): MarkFields {
  const { channel, startSample, endSample, lowHz, highHz, classKey, confidence, note } = mark;
  const { origin, candidateId, rawStartSample, uncertaintySamples, aids, view } = mark;
  const said = { channel, startSample, endSample, lowHz, highHz, classKey, confidence, note };
  return { ...said, origin, candidateId, rawStartSample, uncertaintySamples, aids, view };
}

export function hasSameFields(a: MarkFields, b: MarkFields): boolean {
  return FIELDS.every((name) => JSON.stringify(a[name]) === JSON.stringify(b[name]));
}

export function toBenchMark(event: RecordingEvent, ownPassId: string | null, key = event.id): BenchMark {
  return {
    ...fieldsOf(event),
    key,
    passId: event.passId,
    isOwn: event.passId === ownPassId,
    parameters: event.parameters,
  };
}

export function byTime(a: BenchMark, b: BenchMark): number {
  return a.startSample - b.startSample || a.endSample - b.endSample || (a.key < b.key ? -1 : 1);
}

const LESS_SURE: Readonly<Record<Confidence, Confidence>> = {
  sure: 'probable',
  probable: 'unsure',
  unsure: 'unsure',
};

export function lessSure(confidence: Confidence): Confidence {
  return LESS_SURE[confidence];
}
