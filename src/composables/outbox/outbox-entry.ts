import type { RecordingEvent } from '@shared/contract/events.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import { changedFields, holdsAll, isSameValue, mergeFields } from '@/composables/outbox/merge-fields.ts';
import type { Fields } from '@/composables/outbox/merge-fields.ts';

/** Whose mark it is, and where it belongs. */
export interface MarkPlace {
  personId: string;
  recordingId: string;
  passId: string;
  /** So that it can be named where the recording is not at hand. */
  title: string;
  sampleRateHz: number;
}

/** What the server is known to have. */
export interface StoredMark {
  revision: number;
  mark: MarkFields;
}

export type EntryState = 'waiting' | 'conflict' | 'refused';

/** One mark that is not stored as it should be. Plain data, as it lies in the outbox. */
export interface OutboxEntry {
  id: string;
  place: MarkPlace;
  /** `null` where the server is not known to have the mark. */
  base: StoredMark | null;
  /** What the mark should be; `null` to remove it. */
  wish: MarkFields | null;
  /** Forms that were sent and may have been stored: no answer came, or not yet. `null` stands for the removal. */
  sent: (MarkFields | null)[];
  state: EntryState;
  /** Of the server, where it refused. */
  sentence: string;
  /** Of a conflict: the mark as the server has it; `null` where it is gone. */
  theirs: RecordingEvent | null;
  sinceMs: number;
}

export type SaveRequest =
  | { kind: 'create'; id: string; mark: MarkFields }
  | { kind: 'change'; id: string; revision: number; change: Partial<MarkFields>; mark: MarkFields }
  | { kind: 'remove'; id: string; revision: number };

/** A change of one mark as a person sees it: from what was shown to what is wanted. */
export interface MarkChange {
  id: string;
  from: MarkFields | null;
  to: MarkFields | null;
  stored: StoredMark | null;
}

export const toStored = (event: RecordingEvent): StoredMark => ({
  revision: event.revision,
  mark: fieldsOf(event),
});

/**
 * The entry with one more change. Only the fields that were changed are touched, so that changes made in two windows at
 * the same time both count. `null` where nothing is left to do.
 */
export function withChange(
  present: OutboxEntry | undefined,
  change: MarkChange,
  place: MarkPlace,
  nowMs: number,
): OutboxEntry | null {
  const entry = present ?? newEntry(change, place, nowMs);
  const wish = wishOf(entry, change);
  const base = baseUnder(entry, change);
  const state = entry.state === 'refused' ? 'waiting' : entry.state;
  const sentence = state === 'waiting' ? '' : entry.sentence;
  const next: OutboxEntry = { ...entry, base, wish, state, sentence };
  return isDone(next) ? null : next;
}

/**
 * Another window, or an answer, may have been a moment faster than this change: a mark that was shown but is neither kept nor
 * known to be stored has just been stored; one that was shown as removed has just been removed. Both are asked for.
 */
function newEntry({ id, from, stored }: MarkChange, place: MarkPlace, nowMs: number): OutboxEntry {
  const facts = { id, place, base: stored, sinceMs: nowMs, sentence: '', theirs: null };
  const sent = stored ? (from ? [] : [null]) : from ? [from] : [];
  return { ...facts, sent, state: 'waiting', wish: stored?.mark ?? from };
}

function wishOf({ wish }: OutboxEntry, { from, to }: MarkChange): MarkFields | null {
  if (!to || !from || !wish) return to;
  return { ...wish, ...changedFields({ ...from }, { ...to }) };
}

const NO_REVISION = 0;

/**
 * A field that the server has got from elsewhere a moment ago, and that is changed now by somebody who did not see it yet, is
 * said to be changed from what was seen, under a revision that the server never has: so it asks which of the two counts.
 */
function baseUnder({ base, wish }: OutboxEntry, { from, to }: MarkChange): StoredMark | null {
  if (!base || !wish || !from || !to) return base;
  const server: Fields = { ...base.mark };
  const wanted: Fields = { ...wish };
  const seen: Fields = { ...from };
  const unseen = Object.keys(changedFields(seen, { ...to })).filter(
    (name) => isSameValue(wanted[name], server[name]) && !isSameValue(seen[name], server[name]),
  );
  if (unseen.length === 0) return base;
  const mark = { ...base.mark, ...Object.fromEntries(unseen.map((name) => [name, seen[name]])) };
  return { revision: NO_REVISION, mark };
}

/** Nothing was sent that could have been stored, and the server has what is wanted. */
function isDone({ base, wish, sent, state, theirs }: OutboxEntry): boolean {
  if (state === 'conflict') return wish === null && theirs === null;
  if (sent.length > 0) return false;
  if (!base || !wish) return base === null && wish === null;
  return holdsAll({ ...base.mark }, { ...wish });
}

/** A create that may have arrived is sent again as it was; only its answer tells the revision to change. */
export function requestOf(entry: OutboxEntry): SaveRequest | null {
  const { id, base, wish, sent } = entry;
  if (!base) {
    const mark = sent[0] ?? wish;
    return mark ? { kind: 'create', id, mark } : null;
  }
  const { revision } = base;
  if (!wish) return { kind: 'remove', id, revision };
  const change: Partial<MarkFields> = changedFields({ ...base.mark }, { ...wish });
  return { kind: 'change', id, revision, change, mark: wish };
}

export function formOf(request: SaveRequest): MarkFields | null {
  return request.kind === 'remove' ? null : request.mark;
}

/** Kept before the request goes out: whatever happens then, it is known that this form may have been stored. */
export function withSent(entry: OutboxEntry, request: SaveRequest): OutboxEntry {
  const form = formOf(request);
  const isKnown = entry.sent.some((one) => isSameForm(one, form));
  return isKnown ? entry : { ...entry, sent: [...entry.sent, form] };
}

export function isSameForm(a: MarkFields | null, b: MarkFields | null): boolean {
  if (!a || !b) return a === b;
  return holdsAll({ ...a }, { ...b });
}

export interface MergedEntry {
  merged: MarkFields;
  clashes: string[];
}

/** Both changes of a mark that was changed elsewhere, brought together; `null` where one of them is a removal. */
export function mergeWithTheirs(entry: OutboxEntry, prefer: 'mine' | 'theirs'): MergedEntry | null {
  const { wish, theirs } = entry;
  const forms = entry.sent.filter((form) => form !== null);
  const base = entry.base?.mark ?? forms[0];
  if (!wish || !theirs || !base) return null;
  const sent = forms.map((form) => ({ ...form }));
  return mergeFields({ base: { ...base }, mine: wish, theirs: fieldsOf(theirs), sent, prefer });
}
