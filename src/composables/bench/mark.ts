import type { EventOrigin, RecordingEvent } from '@shared/contract/events.ts';
import type { BurstParameters } from '@shared/contract/measurement.ts';
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

export function fieldsOf(mark: MarkFields): MarkFields {
  const { channel, startSample, endSample, lowHz, highHz, classKey, confidence, note, origin, candidateId } =
    mark;
  return {
    channel,
    startSample,
    endSample,
    lowHz,
    highHz,
    classKey,
    confidence,
    note,
    origin,
    candidateId,
  };
}

export function hasSameFields(a: MarkFields, b: MarkFields): boolean {
  const other = new Map<string, unknown>(Object.entries(fieldsOf(b)));
  return Object.entries(fieldsOf(a)).every(([name, value]) => other.get(name) === value);
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
