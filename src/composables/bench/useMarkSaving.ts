import { useEventListener } from '@vueuse/core';
import { computed, shallowRef, watch } from 'vue';
import { onBeforeRouteLeave } from 'vue-router';
import { v7 as newId } from 'uuid';
import { eventSchema } from '@shared/contract/events.ts';
import type { RecordingEvent } from '@shared/contract/events.ts';
import { deleteEvent, patchEvent, putEvent } from '@/api/events.ts';
import { isProblem } from '@/api/problem-error.ts';
import type { ProblemError } from '@/api/problem-error.ts';
import { createSaveQueue } from '@/composables/bench/save-queue.ts';
import type { Halt, QueueEntry, SaveAnswer, SaveRequest } from '@/composables/bench/save-queue.ts';
import type { MarkFields } from '@/composables/bench/mark.ts';
import { useSessionStore } from '@/stores/session.ts';

export interface MarkSavingOptions {
  recordingId: string;
  passId: string;
  onStored: (key: string, event: RecordingEvent | null) => void;
}

/** Stores marks as they are made and says how far that has come. */
export function useMarkSaving({ recordingId, passId, onStored }: MarkSavingOptions) {
  const entries = shallowRef<readonly QueueEntry[]>([]);
  const halt = shallowRef<Halt>('none');
  const session = useSessionStore();

  const queue = createSaveQueue({
    send: (request) => Promise.race([send({ recordingId, passId }, request), lateAnswer()]),
    newId,
    wait: (delayMs, run) => {
      const timer = setTimeout(run, delayMs);
      return () => clearTimeout(timer);
    },
    onStored,
    onChange: (present, reason) => {
      entries.value = present;
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
    if (entries.value.length > 0) event.preventDefault();
  });
  onBeforeRouteLeave(() => {
    if (entries.value.length === 0) return true;
    return window.confirm('Some marks are not stored yet. Leave the bench and lose them?');
  });

  return {
    queue,
    entries,
    halt,
    undecided: computed(() =>
      entries.value.filter(({ state }) => state === 'conflict' || state === 'refused'),
    ),
  };
}

const LONGEST_ANSWER_MS = 20_000;

/** A request that gets no answer is tried again; each of them is safe to repeat. */
function lateAnswer(): Promise<SaveAnswer> {
  return new Promise((resolve) => {
    setTimeout(() => resolve({ kind: 'unreachable', retryAfterS: null }), LONGEST_ANSWER_MS);
  });
}

async function send(
  place: { recordingId: string; passId: string },
  request: SaveRequest,
): Promise<SaveAnswer> {
  try {
    if (request.kind === 'create')
      return { kind: 'stored', event: await putEvent(request.id, { ...place, ...request.mark }) };
    if (request.kind === 'change') {
      const event = await patchEvent(request.id, request.revision, changeable(request.mark));
      return { kind: 'stored', event };
    }
    await deleteEvent(request.id, request.revision);
    return { kind: 'removed' };
  } catch (error) {
    return answerOf(error, request.kind);
  }
}

function changeable(mark: MarkFields) {
  const { origin: _origin, candidateId: _candidateId, ...rest } = mark;
  return rest;
}

function answerOf(error: unknown, kind: SaveRequest['kind']): SaveAnswer {
  if (!isProblem(error)) return { kind: 'refused', sentence: 'This page met an error it does not know.' };
  if (error.code === 'sign-in-required') return { kind: 'signed-out' };
  if (error.status === 0 || error.status === 429 || error.status >= 500)
    return { kind: 'unreachable', retryAfterS: error.retryAfterS };
  if (error.code === 'stale') return { kind: 'conflict', theirs: currentOf(error) };
  if (error.code === 'not-found' && kind === 'remove') return { kind: 'removed' };
  if (error.code === 'not-found' && kind === 'change') return { kind: 'conflict', theirs: null };
  return { kind: 'refused', sentence: sentenceOf(error) };
}

function currentOf(error: ProblemError): RecordingEvent | null {
  const parsed = eventSchema.safeParse(error.problem.current);
  return parsed.success ? parsed.data : null;
}

function sentenceOf(error: ProblemError): string {
  const fields = error.fields.map(({ path, message }) => `${path} ${message}`).join('; ');
  return fields ? `${error.message} ${fields}.` : error.message;
}
