import type { RecordingEvent } from '@shared/contract/events.ts';
import { withAnswer } from '@/composables/outbox/outbox-answers.ts';
import type { MarkAnswer, Outcome } from '@/composables/outbox/outbox-answers.ts';
import { requestOf, withSent } from '@/composables/outbox/outbox-entry.ts';
import type { MarkPlace, OutboxEntry, SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';
import { createSendingLoop } from '@/composables/outbox/sending-loop.ts';
import type { LoopParts, NoAnswer } from '@/composables/outbox/sending-loop.ts';

export type SendAnswer = MarkAnswer | NoAnswer;

export interface SenderParts extends LoopParts {
  personId: string;
  store: OutboxStore;
  send: (request: SaveRequest, place: MarkPlace) => Promise<SendAnswer>;
  newId: () => string;
  /** What is kept under an id has changed; `event` is what the server has now, where that has become known. */
  onEntry: (id: string, entry: OutboxEntry | null, event?: RecordingEvent | null) => void;
}

/** One mark that is answered by its own conflict again and again waits like one that cannot be sent. */
const MOST_TRIES_IN_A_ROW = 6;

/**
 * Sends what waits, the oldest first, one after another. What cannot be sent stays and is tried again; what a person has to
 * decide on stays aside.
 */
export function createSender(parts: SenderParts) {
  const { personId, store, send, newId, onEntry } = parts;
  const loop = createSendingLoop(parts, drain);
  const { mayRun, pause } = loop;

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
    loop.wasAnswered();
    const known: { outcome: Outcome } = { outcome: { entry: null, event: undefined } };
    const entry = await store.update(id, (present) => {
      known.outcome = present
        ? withAnswer(present, request, answer, newId)
        : { entry: null, event: answer.kind === 'stored' ? answer.event : undefined };
      return known.outcome.entry;
    });
    onEntry(id, entry, known.outcome.event);
  }

  return { wake: loop.wake, retry: loop.retry, stop: loop.stop };
}
