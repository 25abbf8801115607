import type { Answered, RoundAnswer } from '@shared/contract/rounds.ts';

/** Whose answers they are, and where they belong. */
export interface AnswerPlace {
  personId: string;
  recordingId: string;
  passId: string;
  /** So that it can be named where the recording is not at hand. */
  title: string;
}

/** One press of a key: an answer, or the answers to a whole group. They are stored together or not at all. Plain data. */
export interface AnswerPacket {
  /** Rises with time: packets are sent in the order of their ids. */
  id: string;
  place: AnswerPlace;
  /** For the one who is asked about it: "crack at 41.324 8 s". */
  name: string;
  answers: RoundAnswer[];
  state: 'waiting' | 'conflict' | 'refused';
  /** Of the server, where it refused. */
  sentence: string;
  /** Of a conflict: what the server has instead. */
  theirs: Answered | null;
}

export function isUndecided({ state }: Pick<AnswerPacket, 'state'>): boolean {
  return state !== 'waiting';
}

/** What the server has of a candidate: the answer under which another one may be given. */
export type StoredPlace = { id: string; revision: number } | null;

/** Changes name the answer that they change, by its id and revision; what is answered anew has neither a revision. */
export function withPlaces(
  packet: AnswerPacket,
  placeOf: (candidateId: string) => StoredPlace | undefined,
): AnswerPacket {
  const answers = packet.answers.map((answer) => {
    const place = placeOf(answer.candidateId);
    if (place === undefined) return answer;
    return place ? { ...answer, id: place.id, revision: place.revision } : { ...answer, revision: null };
  });
  return { ...packet, answers };
}

/** What the answers of the server say about the places of later packets. */
export function placesIn(answered: readonly Answered[]): (candidateId: string) => StoredPlace | undefined {
  const places = new Map(answered.map(({ candidateId, answer }) => [candidateId, answer]));
  return (candidateId) => places.get(candidateId);
}

export function waitingAgain(packet: AnswerPacket): AnswerPacket {
  return { ...packet, state: 'waiting', sentence: '', theirs: null };
}

/** Answers of a pass that wait in this browser. */
export interface KeptRound {
  place: AnswerPlace;
  answers: number;
  undecided: number;
}

export function byRound(packets: readonly AnswerPacket[]): KeptRound[] {
  const rounds = new Map<string, KeptRound>();
  for (const packet of packets) {
    const { place, answers } = packet;
    const round = rounds.get(place.passId) ?? { place, answers: 0, undecided: 0 };
    round.answers += answers.length;
    if (isUndecided(packet)) round.undecided += answers.length;
    rounds.set(place.passId, round);
  }
  return [...rounds.values()];
}
