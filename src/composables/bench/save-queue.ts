import type { RecordingEvent } from '@shared/contract/events.ts';
import { hasSameFields } from '@/composables/bench/mark.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';

export type SaveRequest =
  | { kind: 'create'; id: string; mark: MarkFields }
  | { kind: 'change'; id: string; revision: number; mark: MarkFields }
  | { kind: 'remove'; id: string; revision: number };

export type SaveAnswer =
  | { kind: 'stored'; event: RecordingEvent }
  | { kind: 'removed' }
  /** Somebody changed it in between; `null` where it is gone. */
  | { kind: 'conflict'; theirs: RecordingEvent | null }
  /** The server says no, and will say so again. */
  | { kind: 'refused'; sentence: string }
  | { kind: 'signed-out' }
  | { kind: 'unreachable'; retryAfterS: number | null };

export type EntryState = 'waiting' | 'sending' | 'conflict' | 'refused';

/** One mark that is not stored as it should be. Plain data, so that it can be kept elsewhere and restored. */
export interface QueueEntry {
  key: string;
  id: string;
  /** Revision that the server is known to have; `null` where it is not known to have the mark. */
  revision: number | null;
  /** What the mark should be; `null` to remove it. */
  wish: MarkFields | null;
  /** Sent for the first time, and no answer came: it may be stored or not. */
  tried: MarkFields | null;
  state: EntryState;
  sentence: string;
  theirs: RecordingEvent | null;
}

export interface SaveQueueParts {
  send: (request: SaveRequest) => Promise<SaveAnswer>;
  newId: () => string;
  /** Calls back after a while; returns the way to stop it. */
  wait: (delayMs: number, run: () => void) => () => void;
  /** The server has the mark like this now; `null` when it was removed. */
  onStored: (key: string, event: RecordingEvent | null) => void;
  onChange: (entries: readonly QueueEntry[], halt: Halt) => void;
}

/** Why nothing is sent at the moment. */
export type Halt = 'none' | 'unreachable' | 'signed-out';
export type SaveQueue = ReturnType<typeof createSaveQueue>;

const LONGEST_DELAY_S = 30;

/**
 * Stores marks one after another, each as it is wanted last. What cannot be sent waits and is tried again with
 * growing pauses; what the server refuses, or has in another form, waits for a person. Nothing is dropped.
 */
export function createSaveQueue({ send, newId, wait, onStored, onChange }: SaveQueueParts) {
  const entries = new Map<string, QueueEntry>();
  const stored = new Map<string, { id: string; revision: number }>();
  let isSending = false;
  let failures = 0;
  let halt: Halt = 'none';
  let stopWaiting: (() => void) | null = null;

  /** Tells the queue what the server has already. */
  function adopt(key: string, id: string, revision: number): void {
    stored.set(key, { id, revision });
  }

  function want(key: string, wish: MarkFields | null): void {
    const entry = entries.get(key) ?? newEntry(key);
    const isUnknownToServer = entry.revision === null && entry.tried === null && entry.state !== 'sending';
    if (wish === null && isUnknownToServer) entries.delete(key);
    else entries.set(key, { ...entry, wish, state: stateAfterWish(entry.state) });
    changed();
    void pump();
  }

  function newEntry(key: string): QueueEntry {
    const place = stored.get(key);
    return {
      key,
      id: place?.id ?? newId(),
      revision: place?.revision ?? null,
      wish: null,
      tried: null,
      state: 'waiting',
      sentence: '',
      theirs: null,
    };
  }

  async function pump(): Promise<void> {
    if (isSending || halt !== 'none') return;
    const entry = [...entries.values()].find(({ state }) => state === 'waiting');
    if (!entry) return;
    const request = requestOf(entry);
    if (!request) {
      entries.delete(entry.key);
      return next();
    }
    isSending = true;
    const tried = request.kind === 'create' ? request.mark : entry.tried;
    update(entry.key, { state: 'sending', tried });
    settle(entry.key, request, await send(request));
    isSending = false;
    next();
  }

  function next(): void {
    changed();
    void pump();
  }

  function settle(key: string, request: SaveRequest, answer: SaveAnswer): void {
    const entry = entries.get(key);
    if (!entry) return;
    if (answer.kind === 'stored') settleStored(entry, request, answer.event);
    else if (answer.kind === 'removed') settleRemoved(entry);
    else if (answer.kind === 'conflict') settleConflict(entry, request, answer.theirs);
    else if (answer.kind === 'refused')
      update(key, { state: 'refused', sentence: answer.sentence, tried: null });
    else pause(key, answer);
  }

  function settleStored(entry: QueueEntry, request: SaveRequest, event: RecordingEvent): void {
    failures = 0;
    adopt(entry.key, event.id, event.revision);
    const sent = request.kind === 'remove' ? null : request.mark;
    if (entry.wish === sent) entries.delete(entry.key);
    else update(entry.key, { state: 'waiting', revision: event.revision, tried: null });
    onStored(entry.key, event);
  }

  /** A change that had arrived, and whose answer was lost, meets itself when it is sent again. */
  function settleConflict(entry: QueueEntry, request: SaveRequest, theirs: RecordingEvent | null): void {
    const isOurs = theirs !== null && request.kind === 'change' && hasSameFields(theirs, request.mark);
    if (isOurs) settleStored(entry, request, theirs);
    else update(entry.key, { state: 'conflict', theirs });
  }

  /** Where the mark is wanted again meanwhile, it comes back under a new id: the old one stays a trace. */
  function settleRemoved(entry: QueueEntry): void {
    failures = 0;
    stored.delete(entry.key);
    if (entry.wish === null) entries.delete(entry.key);
    else update(entry.key, { state: 'waiting', id: newId(), revision: null, tried: null });
    onStored(entry.key, null);
  }

  function pause(key: string, answer: Extract<SaveAnswer, { kind: 'signed-out' | 'unreachable' }>): void {
    update(key, { state: 'waiting' });
    halt = answer.kind;
    if (answer.kind === 'signed-out') return;
    const delayS = answer.retryAfterS ?? Math.min(LONGEST_DELAY_S, 2 ** failures);
    failures++;
    stopWaiting = wait(delayS * 1000, retry);
  }

  /** Tries at once what waits: the connection is back, or somebody signed in again. */
  function retry(): void {
    stopWaiting?.();
    stopWaiting = null;
    halt = 'none';
    next();
  }

  /** The answer of a person to a mark that the server has in another form, or refused. */
  function decide(key: string, choice: 'mine' | 'theirs'): void {
    const entry = entries.get(key);
    if (!entry || entry.state === 'waiting' || entry.state === 'sending') return;
    if (choice === 'mine') keepMine(entry);
    else takeTheirs(entry);
    next();
  }

  function keepMine(entry: QueueEntry): void {
    const isGone = entry.state === 'conflict' && entry.theirs === null;
    const place = isGone ? { id: newId(), revision: null, tried: null } : {};
    const revision = entry.theirs ? { revision: entry.theirs.revision, id: entry.theirs.id } : {};
    update(entry.key, { ...place, ...revision, state: 'waiting', theirs: null, sentence: '' });
  }

  function takeTheirs(entry: QueueEntry): void {
    entries.delete(entry.key);
    if (entry.theirs) adopt(entry.key, entry.theirs.id, entry.theirs.revision);
    else if (entry.state === 'conflict') stored.delete(entry.key);
    onStored(entry.key, entry.theirs);
  }

  function update(key: string, values: Partial<QueueEntry>): void {
    const entry = entries.get(key);
    if (!entry) return;
    entries.set(key, { ...entry, ...values });
    changed();
  }

  function changed(): void {
    onChange([...entries.values()], halt);
  }

  return {
    adopt,
    keep: (key: string, mark: MarkFields) => want(key, mark),
    remove: (key: string) => want(key, null),
    retry,
    decide,
    isPending: (key: string) => entries.has(key),
    /** What is not stored yet, to be kept beyond the life of the page. */
    entries: () => [...entries.values()],
    /** Takes up again what an earlier page could not store. */
    restore(kept: readonly QueueEntry[]): void {
      for (const entry of kept) entries.set(entry.key, { ...entry, state: stateAfterRestore(entry.state) });
      next();
    },
    stop: () => stopWaiting?.(),
  };
}

function stateAfterWish(state: EntryState): EntryState {
  return state === 'refused' ? 'waiting' : state;
}

function stateAfterRestore(state: EntryState): EntryState {
  return state === 'sending' ? 'waiting' : state;
}

/** A create that may have arrived is sent again as it was; only its answer tells the revision to change. */
function requestOf(entry: QueueEntry): SaveRequest | null {
  const { id, revision, wish, tried } = entry;
  if (revision === null) {
    const mark = tried ?? wish;
    return mark ? { kind: 'create', id, mark } : null;
  }
  return wish ? { kind: 'change', id, revision, mark: wish } : { kind: 'remove', id, revision };
}
