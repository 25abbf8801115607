import type { RecordingEvent } from '@shared/contract/events.ts';
import { withChoice } from '@/composables/outbox/outbox-answers.ts';
import type { Outcome } from '@/composables/outbox/outbox-answers.ts';
import { toStored, withChange } from '@/composables/outbox/outbox-entry.ts';
import type { MarkChange, MarkPlace, OutboxEntry, StoredMark } from '@/composables/outbox/outbox-entry.ts';
import { createSender } from '@/composables/outbox/outbox-sender.ts';
import type { SenderParts } from '@/composables/outbox/outbox-sender.ts';
import type { Halt } from '@/composables/outbox/sending-loop.ts';
import type { TabChannel } from '@/composables/outbox/tab-channel.ts';

/** One mark has changed here, in another window or on the server. */
export interface Told {
  id: string;
  /** What is kept of it; `null` where nothing waits. */
  entry: OutboxEntry | null;
  /** What the server has now; `null` where it was removed, `undefined` where nothing new is known. */
  event: RecordingEvent | null | undefined;
}

export interface OutboxParts extends Omit<SenderParts, 'onEntry' | 'onHalt'> {
  channel: TabChannel;
  nowMs: () => number;
  onTold: (told: Told) => void;
  onChange: () => void;
}

export type Outbox = ReturnType<typeof createOutbox>;

/**
 * The marks of one person that are not stored yet. Each change is kept in the storage of the browser before anything else
 * happens, sent from there, and leaves when the server has it or a person has decided.
 */
export function createOutbox(parts: OutboxParts) {
  const { personId, store, channel, newId, nowMs, onTold, onChange } = parts;
  const entries = new Map<string, OutboxEntry>();
  const writing = new Map<string, number>();
  /** Ids of removed marks that came back under a new one. */
  const becameIds = new Map<string, string>();
  const latest = new Map<string, StoredMark>();
  let halt: Halt = 'none';
  let isStopped = false;
  const sender = createSender({ ...parts, onEntry: settle, onHalt: setHalt });
  const stopListening = channel.listen(personId, ({ ids, event }) => void hear(ids, event));

  function setHalt(next: Halt): void {
    halt = next;
    onChange();
  }

  /** Takes over what is kept under an id, and tells the page. */
  function take(id: string, entry: OutboxEntry | null, event?: RecordingEvent | null): void {
    if (entry?.id !== id) entries.delete(id);
    if (entry) entries.set(entry.id, entry);
    if (entry && entry.id !== id) becameIds.set(id, entry.id);
    if (event) latest.set(event.id, toStored(event));
    onTold({ id, entry, event });
    onChange();
  }

  function settle(id: string, entry: OutboxEntry | null, event?: RecordingEvent | null): void {
    take(id, entry, event);
    const ids = entry && entry.id !== id ? [id, entry.id] : [id];
    channel.post({ personId, ids, ...(event === undefined ? {} : { event }) });
  }

  /** Another window changed what is kept; its message comes after the fact, so what is read now is not older. */
  async function hear(ids: readonly string[], event: RecordingEvent | null | undefined): Promise<void> {
    const [id = '', becameId = id] = ids;
    const entry = (await store.get(becameId)) ?? null;
    if (isStopped) return;
    take(id, entry, event);
    if (entry?.state === 'waiting') sender.wake();
  }

  async function whileWriting<Result>(id: string, work: () => Promise<Result>): Promise<Result> {
    writing.set(id, (writing.get(id) ?? 0) + 1);
    onChange();
    try {
      return await work();
    } finally {
      const left = (writing.get(id) ?? 1) - 1;
      if (left > 0) writing.set(id, left);
      else writing.delete(id);
    }
  }

  /** An answer may have come after the change was made on the page, and before it is kept. */
  function fromLatest(change: MarkChange): MarkChange {
    const known = latest.get(change.id);
    const isNewer = known !== undefined && known.revision > (change.stored?.revision ?? 0);
    return isNewer ? { ...change, stored: known } : change;
  }

  /** Resolves when the change is kept. */
  async function put(change: MarkChange, place: MarkPlace): Promise<void> {
    const { id } = change;
    const isMoved = () => becameIds.has(id);
    const entry = await whileWriting(id, () =>
      store.update(id, (present) =>
        present || !isMoved() ? withChange(present, fromLatest(change), place, nowMs()) : null,
      ),
    );
    const becameId = becameIds.get(id);
    if (!entry && becameId !== undefined) return put({ ...change, id: becameId, stored: null }, place);
    settle(id, entry);
    sender.wake();
  }

  /** The answer of a person to a mark that the server has in another form, or refused. */
  async function decide(id: string, choice: 'mine' | 'theirs'): Promise<void> {
    const known: { outcome: Outcome } = { outcome: { entry: null, event: undefined } };
    const entry = await store.update(id, (present) => {
      known.outcome = present ? withChoice(present, choice, newId) : { entry: null, event: undefined };
      return known.outcome.entry;
    });
    settle(id, entry, known.outcome.event);
    sender.wake();
  }

  /** Takes up what earlier pages could not store. @returns how many marks of other people lie in this browser. */
  async function load(): Promise<number> {
    const kept = await store.all();
    const own = kept.filter(({ place }) => place.personId === personId);
    for (const entry of own) if (!writing.has(entry.id)) take(entry.id, entry);
    if (!isStopped) sender.wake();
    return kept.length - own.length;
  }

  return {
    put,
    decide,
    load,
    retry: sender.retry,
    entries: () => [...entries.values()].sort((a, b) => a.sinceMs - b.sinceMs),
    halt: () => halt,
    /** On their way into the storage of the browser. */
    writingIds: () => [...writing.keys()],
    isPending: (id: string) => entries.has(id) || writing.has(id),
    /** Ends sending; what comes back afterwards is still kept. */
    stop(): void {
      isStopped = true;
      stopListening();
      sender.stop();
    },
  };
}
