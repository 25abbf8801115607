import { answeredSchema } from '@shared/contract/rounds.ts';
import { isProblem, refusalWords } from '@/api/problem-error.ts';
import { sendAnswers } from '@/api/rounds.ts';
import { LONGEST_ANSWER_MS, reasonToWait } from '@/composables/outbox/send-mark.ts';
import type { AnswerReply } from '@/composables/rounds/answer-outbox.ts';
import type { AnswerPacket } from '@/composables/rounds/answer-packet.ts';

/** One request for one press, in the name of the person who gave the answers and of nobody else. */
export async function sendPacket({ place, answers }: AnswerPacket): Promise<AnswerReply> {
  const as = { personId: place.personId, signal: AbortSignal.timeout(LONGEST_ANSWER_MS) };
  try {
    return { kind: 'stored', answered: await sendAnswers(place.passId, answers, as) };
  } catch (error) {
    if (as.signal.aborted) return { kind: 'later', why: 'unreachable', retryAfterS: null };
    return replyOf(error);
  }
}

/** What will be the same the next time is refused, everything else is tried again. */
export function replyOf(error: unknown): AnswerReply {
  if (!isProblem(error)) return { kind: 'refused', sentence: 'This page met an error it does not know.' };
  if (error.code === 'sign-in-required') return { kind: 'signed-out' };
  const why = reasonToWait(error);
  if (why) return { kind: 'later', why, retryAfterS: error.retryAfterS };
  if (error.code !== 'stale') return { kind: 'refused', sentence: refusalWords(error) };
  const theirs = answeredSchema.safeParse(error.problem.current);
  return { kind: 'conflict', theirs: theirs.success ? theirs.data : null };
}
