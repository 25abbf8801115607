import type { RecordingEvent } from '@shared/contract/events.ts';
import { fieldsOf } from '@/composables/bench/mark.ts';
import { holdsAll } from '@/composables/outbox/merge-fields.ts';
import { formOf, isSameForm, mergeWithTheirs, toStored } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxEntry, SaveRequest } from '@/composables/outbox/outbox-entry.ts';

/** What the server said about one mark. */
export type MarkAnswer =
  | { kind: 'stored'; event: RecordingEvent }
  | { kind: 'removed' }
  /** Somebody changed it in between; `null` where it was deleted. */
  | { kind: 'conflict'; theirs: RecordingEvent | null }
  /** The server says no, and will say so again; `isInvalid` where it does not even look for the mark. */
  | { kind: 'refused'; sentence: string; isInvalid?: boolean };

/** What becomes of an entry, and what the server has now where that has become known. */
export interface Outcome {
  /** `null` where nothing is left to do. Its id is another one where a removed mark is wanted again. */
  entry: OutboxEntry | null;
  /** `undefined` where the answer says nothing about it; `null` where the mark was removed. */
  event: RecordingEvent | null | undefined;
}

type NewId = () => string;

export function withAnswer(
  entry: OutboxEntry,
  request: SaveRequest,
  answer: MarkAnswer,
  newId: NewId,
): Outcome {
  if (answer.kind === 'stored') return afterStored(entry, formOf(request), answer.event);
  if (answer.kind === 'removed') return afterRemoved(entry, newId);
  if (answer.kind === 'refused') return afterRefused(entry, request, answer);
  if (answer.theirs) return afterStale({ ...entry, theirs: answer.theirs }, answer.theirs);
  return entry.sent.includes(null) ? afterRemoved(entry, newId) : inConflict(entry, null);
}

function afterStored(entry: OutboxEntry, form: OutboxEntry['wish'], event: RecordingEvent): Outcome {
  const known = { ...entry, base: toStored(event), sent: [], theirs: null };
  return { entry: isSameForm(entry.wish, form) ? null : known, event };
}

/** The old id stays a trace on the server, so a mark that is wanted again meanwhile gets a new one. */
function afterRemoved(entry: OutboxEntry, newId: NewId): Outcome {
  return { entry: entry.wish ? anew(entry, newId) : null, event: null };
}

function anew(entry: OutboxEntry, newId: NewId): OutboxEntry {
  return { ...entry, id: newId(), base: null, sent: [], state: 'waiting', sentence: '', theirs: null };
}

type Refusal = Extract<MarkAnswer, { kind: 'refused' }>;

/** A new mark that does not fit was not stored by an earlier try either, so that it can be corrected and sent anew. */
function afterRefused(entry: OutboxEntry, { kind }: SaveRequest, { sentence, isInvalid }: Refusal): Outcome {
  const sent = kind === 'create' && isInvalid ? [] : entry.sent;
  return { entry: { ...entry, state: 'refused', sentence, sent }, event: undefined };
}

/** A change that had arrived, and whose answer was lost, meets itself when it is sent again. */
function afterStale(entry: OutboxEntry, theirs: RecordingEvent): Outcome {
  const present = { ...fieldsOf(theirs) };
  const isOurs = entry.sent.some((form) => form !== null && holdsAll(present, { ...form }));
  if (isOurs) return onTopOf(entry, theirs);
  const merge = mergeWithTheirs(entry, 'mine');
  if (!merge || merge.clashes.length > 0) return inConflict(entry, theirs);
  return onTopOf({ ...entry, wish: merge.merged }, theirs);
}

function onTopOf(entry: OutboxEntry, theirs: RecordingEvent): Outcome {
  const isStored = entry.wish !== null && holdsAll({ ...fieldsOf(theirs) }, { ...entry.wish });
  const next = { ...entry, base: toStored(theirs), sent: [], state: 'waiting', theirs: null } as const;
  return { entry: isStored ? null : { ...next, sent: [] }, event: theirs };
}

function inConflict(entry: OutboxEntry, theirs: RecordingEvent | null): Outcome {
  return { entry: { ...entry, state: 'conflict', theirs }, event: undefined };
}

/** The answer of a person to a mark that the server has in another form, or refused. Fields that do not clash stay of both. */
export function withChoice(entry: OutboxEntry, choice: 'mine' | 'theirs', newId: NewId): Outcome {
  if (entry.state === 'waiting') return { entry, event: undefined };
  if (entry.state === 'refused') return afterRefusal(entry, choice);
  const { theirs } = entry;
  if (!theirs) return choice === 'mine' ? afterRemoved(entry, newId) : { entry: null, event: null };
  const merge = mergeWithTheirs(entry, choice);
  if (merge) return onTopOf({ ...entry, wish: merge.merged }, theirs);
  return choice === 'mine' ? onTopOf(entry, theirs) : { entry: null, event: theirs };
}

function afterRefusal(entry: OutboxEntry, choice: 'mine' | 'theirs'): Outcome {
  if (choice === 'theirs') return { entry: null, event: undefined };
  return { entry: { ...entry, state: 'waiting', sentence: '' }, event: undefined };
}
