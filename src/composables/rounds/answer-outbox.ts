import type { Answered } from '@shared/contract/rounds.ts';
import type { OutboxStore } from '@/composables/outbox/outbox-store.ts';
import { createSendingLoop } from '@/composables/outbox/sending-loop.ts';
import type { Halt, LoopParts, NoAnswer } from '@/composables/outbox/sending-loop.ts';
import type { TabChannel } from '@/composables/outbox/tab-channel.ts';
import { isUndecided, placesIn, waitingAgain, withPlaces } from '@/composables/rounds/answer-packet.ts';
import type { AnswerPacket, StoredPlace } from '@/composables/rounds/answer-packet.ts';

export type AnswerReply =
  | { kind: 'stored'; answered: readonly Answered[] }
  | { kind: 'conflict'; theirs: Answered | null }
  | { kind: 'refused'; sentence: string }
  | NoAnswer;

/** Said to the other windows of this browser after a change. */
export interface AnswerNews {
  personId: string;
  passId: string;
  packetId: string;
  /** What the server has now, where that has become known. */
  answered: readonly Answered[];
}

export interface AnswerOutboxParts extends Omit<LoopParts, 'onHalt'> {
  personId: string;
  store: OutboxStore<AnswerPacket>;
  channel: TabChannel<AnswerNews>;
  send: (packet: AnswerPacket) => Promise<AnswerReply>;
  onStored: (answered: readonly Answered[], passId: string) => void;
  onChange: () => void;
}

export type AnswerOutbox = ReturnType<typeof createAnswerOutbox>;

/**
 * The answers of one person that are not stored yet. Each press is kept in the storage of the browser, and sent from there one
 * after another in the order in which they were given. What the server refuses, or has answered otherwise, waits for a person
 * and holds nothing else up. Nothing is dropped.
 */
export function createAnswerOutbox(parts: AnswerOutboxParts) {
  const { personId, store, channel, send, onStored, onChange } = parts;
  const packets = new Map<string, AnswerPacket>();
  const stored = new Map<string, StoredPlace>();
  const writing = new Set<string>();
  let halt: Halt = 'none';
  const loop = createSendingLoop({ ...parts, onHalt: setHalt }, drain);
  const stopListening = channel.listen(personId, (news) => void hear(news));

  function setHalt(next: Halt): void {
    halt = next;
    onChange();
  }

  /** Takes over what is kept under an id, and what has become known of the server with it. */
  function take({ packetId, passId, answered }: AnswerNews, packet: AnswerPacket | null): void {
    if (packet) packets.set(packetId, packet);
    else packets.delete(packetId);
    for (const { candidateId, answer } of answered) stored.set(candidateId, answer);
    onChange();
    if (answered.length > 0) onStored(answered, passId);
  }

  function settle(was: AnswerPacket, packet: AnswerPacket | null, answered: readonly Answered[] = []): void {
    const news = { personId, passId: was.place.passId, packetId: was.id, answered };
    take(news, packet);
    channel.post(news);
  }

  /** Another window changed what is kept; its message comes after the fact. */
  async function hear(news: AnswerNews): Promise<void> {
    const packet = (await store.get(news.packetId)) ?? null;
    take(news, packet);
    if (packet) loop.wake();
  }

  /** Shown as waiting at once. Resolves when it is kept. */
  async function add(packet: AnswerPacket): Promise<void> {
    const answeredAgain = decidedBy(packet);
    for (const { theirs } of answeredAgain) if (theirs) stored.set(theirs.candidateId, theirs.answer);
    for (const { id } of answeredAgain) packets.delete(id);
    writing.add(packet.id);
    packets.set(packet.id, packet);
    onChange();
    // What is stored meanwhile counts: the change is made when its turn has come.
    await store.update(packet.id, () => withPlaces(packet, (id) => stored.get(id)));
    writing.delete(packet.id);
    for (const one of answeredAgain) await forget(one);
    settle(packet, packet);
    loop.wake();
  }

  /** What waits for a decision is decided by answering the same candidates again. */
  function decidedBy({ answers }: AnswerPacket): AnswerPacket[] {
    const ids = new Set(answers.map(({ candidateId }) => candidateId));
    return [...packets.values()].filter(
      (packet) => isUndecided(packet) && packet.answers.every(({ candidateId }) => ids.has(candidateId)),
    );
  }

  async function forget(packet: AnswerPacket, answered: readonly Answered[] = []): Promise<void> {
    await store.update(packet.id, () => null);
    settle(packet, null, answered);
  }

  async function drain(): Promise<void> {
    for (let ids = await waitingIds(); ids.length > 0; ids = await waitingIds())
      for (const id of ids) {
        if (!loop.mayRun()) return;
        await sendOne(id);
      }
  }

  const isOwn = ({ place }: AnswerPacket) => place.personId === personId;

  async function waitingIds(): Promise<string[]> {
    const waiting = (await store.all()).filter((packet) => isOwn(packet) && !isUndecided(packet));
    return waiting.map(({ id }) => id).sort();
  }

  async function sendOne(id: string): Promise<void> {
    const packet = await store.get(id);
    if (!packet || isUndecided(packet)) return;
    const reply = await send(packet);
    if (reply.kind === 'signed-out') return loop.pause('signed-out', null);
    if (reply.kind === 'later') return loop.pause(reply.why, reply.retryAfterS);
    loop.wasAnswered();
    if (reply.kind === 'stored') return afterStored(packet, reply.answered);
    const told = reply.kind === 'conflict' ? { theirs: reply.theirs } : { sentence: reply.sentence };
    const aside = await store.update(id, (present) =>
      present ? { ...present, state: reply.kind, ...told } : null,
    );
    settle(packet, aside);
  }

  /** Later answers to the same candidates change what was stored now. They are told first: a packet may be sent twice. */
  async function afterStored(packet: AnswerPacket, answered: readonly Answered[]): Promise<void> {
    const places = placesIn(answered);
    for (const { candidateId, answer } of answered) stored.set(candidateId, answer);
    for (const other of await store.all()) {
      const isLater = other.id > packet.id && isOwn(other);
      if (isLater && other.answers.some(({ candidateId }) => places(candidateId) !== undefined))
        await store.update(other.id, (present) => (present ? withPlaces(present, places) : null));
    }
    await forget(packet, answered);
  }

  /** The word of a person about what the server refused, or has answered otherwise. */
  async function decide(id: string, choice: 'mine' | 'theirs'): Promise<void> {
    const packet = packets.get(id);
    if (!packet || !isUndecided(packet)) return;
    const answered = packet.theirs ? [packet.theirs] : [];
    if (choice === 'theirs') return forget(packet, answered);
    const again = await store.update(id, (present) =>
      present ? waitingAgain(withPlaces(present, placesIn(answered))) : null,
    );
    settle(packet, again);
    loop.wake();
  }

  /** Takes up what earlier pages could not store. @returns how many answers of other people lie in this browser. */
  async function load(): Promise<number> {
    const kept = await store.all();
    for (const packet of kept) if (isOwn(packet)) packets.set(packet.id, packet);
    onChange();
    loop.wake();
    return kept.filter((packet) => !isOwn(packet)).reduce((sum, { answers }) => sum + answers.length, 0);
  }

  return {
    add,
    decide,
    load,
    /** Tells what the server has already; what waits here is not touched by it. */
    adopt: (candidateId: string, place: StoredPlace) => stored.set(candidateId, place),
    retry: loop.retry,
    packets: () => [...packets.values()].sort((a, b) => (a.id < b.id ? -1 : 1)),
    isWriting: () => writing.size > 0,
    halt: () => halt,
    /** Ends sending; what comes back afterwards is still kept. */
    stop(): void {
      stopListening();
      loop.stop();
    },
  };
}
