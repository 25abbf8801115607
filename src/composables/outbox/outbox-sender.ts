import type { RecordingEvent } from '@shared/contract/events.ts';
import { withAnswer } from '@/composables/outbox/outbox-answers.ts';
import type { MarkAnswer, Outcome } from '@/composables/outbox/outbox-answers.ts';
import { requestOf, withSent } from '@/composables/outbox/outbox-entry.ts';
import type { MarkPlace, OutboxEntry, SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';

/** Why nothing is sent at the moment. */
export type Halt = 'none' | 'unreachable' | 'busy' | 'full' | 'failing' | 'signed-out';

export type SendAnswer =
  | MarkAnswer
  | { kind: 'signed-out' }
  | { kind: 'later'; why: Exclude<Halt, 'none' | 'signed-out'>; retryAfterS: number | null };

export interface SenderParts {
  personId: string;
  store: OutboxStore;
  send: (request: SaveRequest, place: MarkPlace) => Promise<SendAnswer>;
  newId: () => string;
  /** Runs the work while no other window of this browser sends marks of this person. */
  alone: (work: () => Promise<void>) => Promise<void>;
  /** Calls back after a while; returns the way to stop it. */
  wait: (delayMs: number, run: () => void) => () => void;
  /** In [0, 1). */
  random: () => number;
  /** What is kept under an id has changed; `event` is what the server has now, where that has become known. */
  onEntry: (id: string, entry: OutboxEntry | null, event?: RecordingEvent | null) => void;
  onHalt: (halt: Halt) => void;
}

const LONGEST_DELAY_S = 30;
/** One mark that is answered by its own conflict again and again waits like one that cannot be sent. */
const MOST_TRIES_IN_A_ROW = 6;

/** Whole seconds that double with each failure, spread so that many browsers do not come back at the same moment. */
export function delayMs(failures: number, retryAfterS: number | null, random: number): number {
  if (retryAfterS !== null) return Math.round((retryAfterS + random) * 1000);
  return Math.round(Math.min(LONGEST_DELAY_S, 2 ** failures) * (0.5 + random / 2) * 1000);
}

/**
 * Sends what waits, the oldest first, one after another. What cannot be sent stays and is tried again; what a person has to
 * decide on stays aside.
 */
export function createSender(parts: SenderParts) {
  const { personId, store, send, newId, alone, wait, random, onEntry, onHalt } = parts;
  let isRunning = false;
  let isAskedAgain = false;
  let isStopped = false;
  let failures = 0;
  let halt: Halt = 'none';
  let stopWaiting: (() => void) | null = null;

  function setHalt(next: Halt): void {
    halt = next;
    onHalt(next);
  }

  const mayRun = () => !isStopped && halt === 'none';

  /** Something may wait to be sent. */
  async function wake(): Promise<void> {
    isAskedAgain = true;
    if (isRunning) return;
    isRunning = true;
    try {
      while (isAskedAgain && mayRun()) {
        isAskedAgain = false;
        await alone(drain);
      }
    } finally {
      isRunning = false;
    }
  }

  async function drain(): Promise<void> {
    const tries = new Map<string, number>();
    const isTiring = (id: string) => (tries.get(id) ?? 0) >= MOST_TRIES_IN_A_ROW;
    for (let ids = await waitingIds(); mayRun(); ids = await waitingIds()) {
      const fresh = ids.filter((id) => !isTiring(id));
      if (fresh.length === 0) {
        if (ids.length > 0) pause('failing', null);
        return;
      }
      for (const id of fresh) {
        if (!mayRun()) return;
        const wasAnswered = await sendOne(id);
        tries.set(id, wasAnswered ? (tries.get(id) ?? 0) + 1 : MOST_TRIES_IN_A_ROW);
      }
    }
  }

  async function waitingIds(): Promise<string[]> {
    const entries = await store.all();
    return entries
      .filter(({ place, state }) => place.personId === personId && state === 'waiting')
      .sort((a, b) => a.sinceMs - b.sinceMs || (a.id < b.id ? -1 : 1))
      .map(({ id }) => id);
  }

  /** @returns false where the server failed at this one mark, so that the others need not wait behind it. */
  async function sendOne(id: string): Promise<boolean> {
    const { request, entry } = await takeRequest(id);
    if (!request || !entry) return true;
    const answer = await send(request, entry.place);
    if (answer.kind === 'signed-out') pause('signed-out', null);
    else if (answer.kind !== 'later') await settle(id, request, answer);
    else if (answer.why !== 'failing') pause(answer.why, answer.retryAfterS);
    else return false;
    return true;
  }

  async function takeRequest(id: string) {
    const taken: { request: SaveRequest | null } = { request: null };
    const entry = await store.update(id, (present) => {
      taken.request = present?.state === 'waiting' ? requestOf(present) : null;
      if (!present || !taken.request) return present ?? null;
      return withSent(present, taken.request);
    });
    onEntry(id, entry);
    return { entry, request: taken.request };
  }

  async function settle(id: string, request: SaveRequest, answer: MarkAnswer): Promise<void> {
    failures = 0;
    const known: { outcome: Outcome } = { outcome: { entry: null, event: undefined } };
    const entry = await store.update(id, (present) => {
      known.outcome = present
        ? withAnswer(present, request, answer, newId)
        : { entry: null, event: answer.kind === 'stored' ? answer.event : undefined };
      return known.outcome.entry;
    });
    onEntry(id, entry, known.outcome.event);
  }

  /** Also where nobody is signed in: somebody may have signed in again in another window. */
  function pause(why: Exclude<Halt, 'none'>, retryAfterS: number | null): void {
    setHalt(why);
    stopWaiting?.();
    stopWaiting = wait(delayMs(failures, retryAfterS, random()), retry);
    failures++;
  }

  /** Tries at once what waits: the connection is back, or somebody signed in again. */
  function retry(): void {
    stopWaiting?.();
    stopWaiting = null;
    if (halt !== 'none') setHalt('none');
    void wake();
  }

  return {
    wake: () => void wake(),
    retry,
    stop(): void {
      isStopped = true;
      stopWaiting?.();
    },
  };
}
