import { eventSchema } from '@shared/contract/events.ts';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { deleteEvent, patchEvent, putEvent } from '@/api/events.ts';
import { isProblem, refusalWords } from '@/api/problem-error.ts';
import type { ProblemError } from '@/api/problem-error.ts';
import type { MarkPlace, SaveRequest } from '@/composables/outbox/outbox-entry.ts';
import type { SendAnswer } from '@/composables/outbox/outbox-sender.ts';

export const LONGEST_ANSWER_MS = 20_000;

/** One request for one mark, in the name of the person who made it and of nobody else. */
export async function sendMark(request: SaveRequest, place: MarkPlace): Promise<SendAnswer> {
  const { personId, recordingId, passId } = place;
  const as = { personId, signal: AbortSignal.timeout(LONGEST_ANSWER_MS) };
  try {
    if (request.kind === 'create') {
      const event = await putEvent(request.id, { recordingId, passId, ...request.mark }, as);
      return { kind: 'stored', event };
    }
    if (request.kind === 'change') {
      const event = await patchEvent(request.id, request.revision, request.change, as);
      return { kind: 'stored', event };
    }
    await deleteEvent(request.id, request.revision, as);
    return { kind: 'removed' };
  } catch (error) {
    if (as.signal.aborted) return { kind: 'later', why: 'unreachable', retryAfterS: null };
    return answerOf(error, request.kind);
  }
}

/** Every answer that is not a success. What will be the same the next time is refused, everything else is tried again. */
export function answerOf(error: unknown, kind: SaveRequest['kind']): SendAnswer {
  if (!isProblem(error)) return { kind: 'refused', sentence: 'This page met an error it does not know.' };
  const { code, status, retryAfterS } = error;
  if (code === 'sign-in-required') return { kind: 'signed-out' };
  const why = reasonToWait(error);
  if (why) return { kind: 'later', why, retryAfterS };
  if (code === 'stale') return staleAnswer(error);
  if (kind === 'remove' && (status === 404 || status === 410)) return { kind: 'removed' };
  if (code === 'gone') return { kind: 'conflict', theirs: null };
  return { kind: 'refused', sentence: refusalWords(error), isInvalid: INVALID.includes(status) };
}

const INVALID = [400, 413, 422];
const BUSY = [408, 425, 429, 503];

export function reasonToWait({ code, status }: ProblemError) {
  if (code === 'offline') return 'unreachable';
  if (status === 507) return 'full';
  if (BUSY.includes(status)) return 'busy';
  if (code === 'unexpected-answer' || status >= 500) return 'failing';
  return null;
}

/** Without its present form there is nothing to compare with, so it is asked for again. */
function staleAnswer({ problem }: ProblemError): SendAnswer {
  const parsed = eventSchema.safeParse(problem.current);
  if (!parsed.success) return { kind: 'later', why: 'failing', retryAfterS: null };
  const theirs: RecordingEvent = parsed.data;
  return { kind: 'conflict', theirs };
}
