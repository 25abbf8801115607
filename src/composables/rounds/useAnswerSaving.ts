import { useEventListener } from '@vueuse/core';
import { onScopeDispose, ref, shallowRef, watch } from 'vue';
import { answeredSchema } from '@shared/contract/rounds.ts';
import type { Answered, RoundAnswer } from '@shared/contract/rounds.ts';
import { isProblem } from '@/api/problem-error.ts';
import { sendAnswers } from '@/api/rounds.ts';
import { createAnswerQueue } from '@/composables/rounds/answer-queue.ts';
import type { AnswerHalt, AnswerReply, QueuedPacket } from '@/composables/rounds/answer-queue.ts';
import { createKeptAnswers } from '@/composables/rounds/kept-answers.ts';
import { useSessionStore } from '@/stores/session.ts';

export interface AnswerSavingOptions {
  passId: string;
  onStored: (answered: readonly Answered[]) => void;
}

const LONGEST_ANSWER_MS = 20_000;

/** Stores the answers of a round as they are given and says how far that has come. */
export function useAnswerSaving({ passId, onStored }: AnswerSavingOptions) {
  const packets = shallowRef<readonly QueuedPacket[]>([]);
  const halt = shallowRef<AnswerHalt>('none');
  /** False where the browser cannot keep what is not stored: then the page must not be left. */
  const isKept = ref(true);
  const session = useSessionStore();
  const kept = createKeptAnswers(passId, window.localStorage);

  const queue = createAnswerQueue({
    send: (answers) => Promise.race([send(passId, answers), lateReply()]),
    wait: (delayMs, run) => {
      const timer = setTimeout(run, delayMs);
      return () => clearTimeout(timer);
    },
    keep: (packet) => (isKept.value = kept.keep(packet)),
    forget: kept.forget,
    onStored,
    onChange: (present, reason) => {
      packets.value = present;
      halt.value = reason;
    },
  });

  watch(
    () => session.hasEnded,
    (hasEnded) => {
      if (!hasEnded) queue.retry();
    },
  );
  useEventListener(window, 'online', queue.retry);
  useEventListener(window, 'beforeunload', (event) => {
    if (packets.value.length > 0 && !isKept.value) event.preventDefault();
  });
  onScopeDispose(queue.stop);

  /** Sends what an earlier page had left; resolves when that is stored, or cannot be at the moment. */
  async function takeUp(): Promise<void> {
    queue.restore(kept.all());
    const isSettled = () =>
      halt.value !== 'none' || packets.value.every(({ state }) => state !== 'waiting' && state !== 'sending');
    await new Promise<void>((resolve) => {
      const stop = watch(
        [packets, halt],
        () => {
          if (!isSettled()) return;
          queueMicrotask(() => stop());
          resolve();
        },
        { immediate: true, flush: 'sync' },
      );
    });
  }

  return { queue, packets, halt, isKept, takeUp };
}

/** A request that gets no answer is tried again; each of them is safe to repeat. */
function lateReply(): Promise<AnswerReply> {
  return new Promise((resolve) => {
    setTimeout(() => resolve({ kind: 'unreachable', retryAfterS: null }), LONGEST_ANSWER_MS);
  });
}

async function send(passId: string, answers: RoundAnswer[]): Promise<AnswerReply> {
  try {
    return { kind: 'stored', answered: await sendAnswers(passId, answers) };
  } catch (error) {
    return replyOf(error);
  }
}

export function replyOf(error: unknown): AnswerReply {
  if (!isProblem(error)) return { kind: 'refused', sentence: 'This page met an error it does not know.' };
  if (error.code === 'sign-in-required') return { kind: 'signed-out' };
  if (error.status === 0 || error.status === 429 || error.status >= 500)
    return { kind: 'unreachable', retryAfterS: error.retryAfterS };
  if (error.code === 'stale') {
    const theirs = answeredSchema.safeParse(error.problem.current);
    return { kind: 'conflict', theirs: theirs.success ? theirs.data : null };
  }
  const fields = error.fields.map(({ path, message }) => `${path} ${message}`).join('; ');
  return { kind: 'refused', sentence: fields ? `${error.message} ${fields}.` : error.message };
}
