import 'fake-indexeddb/auto';
import { createPinia, setActivePinia } from 'pinia';
import { afterEach, beforeEach, describe, expect, test, vi } from 'vitest';
import { effectScope, shallowRef } from 'vue';
import type { EffectScope } from 'vue';
import type { Answered, RoundAnswer, RoundItem, RoundProgress } from '@shared/contract/rounds.ts';
import { clientProblem } from '@/api/problem-error.ts';
import { sendAnswers } from '@/api/rounds.ts';
import type { AnswerPacket } from '@/composables/rounds/answer-packet.ts';
import { useAnswerOutboxStore } from '@/composables/rounds/useAnswerOutboxStore.ts';
import { useRoundAnswers } from '@/composables/rounds/useRoundAnswers.ts';
import { useSessionStore } from '@/stores/session.ts';

vi.mock('@/api/rounds.ts');

const place = { personId: 'ann', recordingId: 'r', passId: 'p', title: 'Droplet 7' };
const answer: RoundAnswer = {
  ...{ id: 'a', candidateId: 'c1', revision: null, verdict: 'no-event', mark: null },
  ...{ groupKey: null, isSpotCheck: false, tookMs: 900 },
};
const packet: AnswerPacket = {
  ...{ id: '1', place, name: 'no event', answers: [answer] },
  ...{ state: 'waiting', sentence: '', theirs: null },
};
const stored: Answered = {
  candidateId: 'c1',
  event: null,
  answer: {
    ...{ id: 'a', candidateId: 'c1', verdict: 'no-event', eventId: null, classKey: null, confidence: null },
    ...{ groupKey: null, isSpotCheck: false, tookMs: 900, at: '2026-03-01T08:00:00.000Z', revision: 1 },
  },
};
const itemOf = (id: string) => ({ rank: 0, candidate: { id }, answer: null }) as unknown as RoundItem;

let scope: EffectScope;
beforeEach(() => {
  vi.stubGlobal('indexedDB', new IDBFactory());
  setActivePinia(createPinia());
  useSessionStore().welcome({ id: 'ann', rules: [] } as never);
  vi.mocked(sendAnswers).mockReset();
  scope = effectScope();
});
afterEach(() => scope.stop());

function openRound() {
  const progress = shallowRef<RoundProgress>({ candidates: 2, events: 0, noEvents: 0, undecided: 0 });
  const marks = { marks: shallowRef([]), takeIn: vi.fn(), takeOut: vi.fn() };
  const answers = scope.run(() => useRoundAnswers({ place, progress, marks: marks as never }))!;
  return { answers, progress };
}

describe('answers that an earlier page could not send', () => {
  test('count as given, once, and stay so when they are stored', async () => {
    vi.mocked(sendAnswers).mockRejectedValueOnce(clientProblem('offline', 'Not there.'));
    const outbox = useAnswerOutboxStore();
    await outbox.add(packet);
    await vi.waitFor(() => expect(outbox.halt).toBe('unreachable'));
    const { answers, progress } = openRound();
    await answers.takeUp();
    answers.adopt([itemOf('c1'), itemOf('c2')]);
    answers.adopt([itemOf('c1')]);
    expect([...answers.said.value.keys()]).toEqual(['c1']);
    expect(progress.value.noEvents).toBe(1);
    vi.mocked(sendAnswers).mockResolvedValue([stored]);
    outbox.retry();
    await vi.waitFor(() => expect(answers.packets.value).toEqual([]));
    expect(progress.value.noEvents).toBe(1);
    expect(sendAnswers).toHaveBeenLastCalledWith('p', [answer], expect.objectContaining({ personId: 'ann' }));
  });

  test('are sent where no round is open, and by a page that opens later', async () => {
    vi.mocked(sendAnswers).mockRejectedValueOnce(clientProblem('offline', 'Not there.'));
    const first = useAnswerOutboxStore();
    await first.add(packet);
    await vi.waitFor(() => expect(first.halt).toBe('unreachable'));
    vi.mocked(sendAnswers).mockResolvedValue([stored]);
    setActivePinia(createPinia());
    const later = useAnswerOutboxStore();
    useSessionStore().welcome({ id: 'ann', rules: [] } as never);
    await vi.waitFor(() => expect(sendAnswers).toHaveBeenCalledTimes(2));
    await vi.waitFor(() => expect(later.packets).toEqual([]));
  });
});
