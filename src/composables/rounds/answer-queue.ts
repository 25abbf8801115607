import type { Answered, RoundAnswer } from '@shared/contract/rounds.ts';

/** One press of a key, its revisions as far as they are known: an answer, or the answers to a whole group. They are stored together or not at all. */
export interface AnswerPacket {
  id: string;
  /** For the one who is asked about it: "crack at 41.324 8 s". */
  name: string;
  answers: RoundAnswer[];
}

export type PacketState = 'waiting' | 'sending' | 'conflict' | 'refused';

export interface QueuedPacket extends AnswerPacket {
  state: PacketState;
  sentence: string;
  /** What the server has instead. */
  theirs: Answered | null;
}

export type AnswerReply =
  | { kind: 'stored'; answered: readonly Answered[] }
  | { kind: 'conflict'; theirs: Answered | null }
  | { kind: 'refused'; sentence: string }
  | { kind: 'signed-out' }
  | { kind: 'unreachable'; retryAfterS: number | null };

/** Why nothing is sent at the moment. */
export type AnswerHalt = 'none' | 'unreachable' | 'signed-out';

export interface AnswerQueueParts {
  send: (answers: RoundAnswer[]) => Promise<AnswerReply>;
  /** Calls back after a while; returns the way to stop it. */
  wait: (delayMs: number, run: () => void) => () => void;
  /** Keeps packets beyond the life of the page: written before they are shown as kept. */
  keep: (packet: AnswerPacket) => void;
  forget: (packetId: string) => void;
  onStored: (answered: readonly Answered[]) => void;
  onChange: (packets: readonly QueuedPacket[], halt: AnswerHalt) => void;
}

interface StoredPlace {
  id: string;
  revision: number;
}

export type AnswerQueue = ReturnType<typeof createAnswerQueue>;

const LONGEST_DELAY_S = 30;

/**
 * Stores answers one press after another, in the order in which they were given. What cannot be sent waits and is tried again
 * with growing pauses; what the server refuses, or has answered otherwise, waits for a person and holds nothing else up.
 * Nothing is dropped.
 */
export function createAnswerQueue(parts: AnswerQueueParts) {
  const packets = new Map<string, QueuedPacket>();
  const stored = new Map<string, StoredPlace>();
  let isSending = false;
  let failures = 0;
  let halt: AnswerHalt = 'none';
  let stopWaiting: (() => void) | null = null;

  /** Tells the queue what the server has already. */
  function adopt(candidateId: string, place: StoredPlace | null): void {
    if (place) stored.set(candidateId, { id: place.id, revision: place.revision });
    else stored.delete(candidateId);
  }

  function add(packet: AnswerPacket): void {
    dropAnsweredAgain(packet);
    const placed = { ...packet, answers: packet.answers.map(withPlace) };
    parts.keep(placed);
    packets.set(packet.id, { ...placed, state: 'waiting', sentence: '', theirs: null });
    next();
  }

  /** What waits for a decision is decided by answering the same candidates again. */
  function dropAnsweredAgain({ answers }: AnswerPacket): void {
    const ids = new Set(answers.map(({ candidateId }) => candidateId));
    for (const packet of packets.values()) {
      if (!isUndecided(packet) || !packet.answers.every(({ candidateId }) => ids.has(candidateId))) continue;
      if (packet.theirs?.answer) adopt(packet.theirs.candidateId, packet.theirs.answer);
      remove(packet.id);
    }
  }

  async function pump(): Promise<void> {
    if (isSending || halt !== 'none') return;
    const packet = [...packets.values()].find(({ state }) => state === 'waiting');
    if (!packet) return;
    isSending = true;
    const { id, name } = packet;
    const answers = packet.answers.map(withPlace);
    // Kept as it is sent: another page would have to send the same to be answered the same.
    parts.keep({ id, name, answers });
    update(id, { state: 'sending', answers });
    const reply = await parts.send(answers);
    isSending = false;
    settle(packet, reply);
    next();
  }

  /** Changes name the answer that they change, by its id and revision. */
  function withPlace(answer: RoundAnswer): RoundAnswer {
    const place = stored.get(answer.candidateId);
    return place ? { ...answer, ...place } : answer;
  }

  function settle(packet: QueuedPacket, reply: AnswerReply): void {
    if (reply.kind === 'stored') {
      failures = 0;
      for (const { candidateId, answer } of reply.answered) adopt(candidateId, answer);
      remove(packet.id);
      parts.onStored(reply.answered);
    } else if (reply.kind === 'conflict') update(packet.id, { state: 'conflict', theirs: reply.theirs });
    else if (reply.kind === 'refused') update(packet.id, { state: 'refused', sentence: reply.sentence });
    else pause(packet.id, reply);
  }

  function pause(id: string, reply: Extract<AnswerReply, { kind: 'signed-out' | 'unreachable' }>): void {
    update(id, { state: 'waiting' });
    halt = reply.kind;
    if (reply.kind === 'signed-out') return;
    const delayS = reply.retryAfterS ?? Math.min(LONGEST_DELAY_S, 2 ** failures);
    failures++;
    stopWaiting = parts.wait(delayS * 1000, retry);
  }

  /** Tries at once what waits: the connection is back, or somebody signed in again. */
  function retry(): void {
    stopWaiting?.();
    stopWaiting = null;
    halt = 'none';
    next();
  }

  /** The word of a person about what the server refused, or has answered otherwise. */
  function decide(id: string, choice: 'mine' | 'theirs'): void {
    const packet = packets.get(id);
    if (!packet || !isUndecided(packet)) return;
    if (packet.state === 'conflict' && packet.theirs) adopt(packet.theirs.candidateId, packet.theirs.answer);
    if (choice === 'mine') update(id, { state: 'waiting', sentence: '', theirs: null });
    else {
      remove(id);
      if (packet.theirs) parts.onStored([packet.theirs]);
    }
    next();
  }

  function remove(id: string): void {
    packets.delete(id);
    parts.forget(id);
    changed();
  }

  function update(id: string, values: Partial<QueuedPacket>): void {
    const packet = packets.get(id);
    if (!packet) return;
    packets.set(id, { ...packet, ...values });
    changed();
  }

  function next(): void {
    changed();
    void pump();
  }

  function changed(): void {
    parts.onChange([...packets.values()], halt);
  }

  return {
    adopt,
    add,
    retry,
    decide,
    /** Takes up again what an earlier page could not store. */
    restore(kept: readonly AnswerPacket[]): void {
      for (const packet of kept)
        if (!packets.has(packet.id))
          packets.set(packet.id, { ...packet, state: 'waiting', sentence: '', theirs: null });
      next();
    },
    stop: () => stopWaiting?.(),
  };
}

export function isUndecided({ state }: Pick<QueuedPacket, 'state'>): boolean {
  return state === 'conflict' || state === 'refused';
}
