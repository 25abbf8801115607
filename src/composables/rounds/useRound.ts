import { useEventListener, useLocalStorage } from '@vueuse/core';
import { computed, ref, shallowRef, watch } from 'vue';
import type { RoundOrder } from '@shared/contract/passes.ts';
import type { RoundItem } from '@shared/contract/rounds.ts';
import type { Confidence } from '@shared/contract/schemes.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { timeWords } from '@/composables/bench/mark-words.ts';
import { afterAnswer, FRESH, minutesLeft, REST_AFTER_MS, rested } from '@/composables/rounds/round-pace.ts';
import { answeredCount } from '@/composables/rounds/round-steps.ts';
import type { RoundStep, Said } from '@/composables/rounds/round-steps.ts';
import { answerSaveWords, progressWords, sayingWords } from '@/composables/rounds/round-words.ts';
import { useLookAlikes } from '@/composables/rounds/useLookAlikes.ts';
import { useRoundAnswers } from '@/composables/rounds/useRoundAnswers.ts';
import { useRoundItems } from '@/composables/rounds/useRoundItems.ts';
import { useRoundPlace } from '@/composables/rounds/useRoundPlace.ts';
import { FIRST_SETTINGS, useShowing } from '@/composables/rounds/useShowing.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';
import { formatCount } from '@/composables/useFormat.ts';
import { useSessionStore } from '@/stores/session.ts';

export type Round = ReturnType<typeof useRound>;

/** Of a press that comes before the candidate it would answer. */
const UNSEEN_WORDS = 'Nothing answered: the candidate is not shown yet';

/** Candidates one after another: one key answers, stores, goes on and plays the next. */
export function useRound(bench: Bench, passId: string) {
  const { scheme, marks } = bench;
  const { sampleRateHz } = bench.layout;
  const { announce } = useAnnounce();
  const settings = useLocalStorage('recalesce.rounds', FIRST_SETTINGS, { mergeDefaults: true });
  const showing = useShowing(bench, settings);
  const { show, factsOf } = showing;
  const pace = shallowRef(FRESH);
  const last = shallowRef<Said | null>(null);
  const isReady = ref(false);
  const startProblem = shallowRef<unknown>(null);

  const items = useRoundItems({ passId, onItems: (found) => answers.adopt(found) });
  const { id: recordingId, runTitle: title } = bench.recording;
  const waiting = { personId: useSessionStore().user?.id ?? '', recordingId, passId, title };
  const answers = useRoundAnswers({ place: waiting, progress: items.progress, marks });
  const sayingOf = (item: RoundItem | null) => answers.said.value.get(item?.candidate.id ?? '') ?? null;
  const place = useRoundPlace({ items, isAnswered: (item) => sayingOf(item) !== null, show });
  const { current } = place;
  const lookAlikes = useLookAlikes({ items, current, said: answers.said });

  watch(place.upcoming, showing.prepare);

  async function start(order: RoundOrder | null = null): Promise<void> {
    startProblem.value = null;
    place.forget();
    try {
      await answers.takeUp();
      const { firstUnanswered } = await items.open(order);
      isReady.value = true;
      await (firstUnanswered === null ? place.advance() : place.jumpTo(firstUnanswered));
    } catch (error) {
      startProblem.value = error;
    }
  }

  function nameOf({ candidate }: RoundItem, said: Said | null): string {
    return `${sayingWords(said, scheme.classes)} at ${timeWords(candidate.onsetSample, sampleRateHz)}`;
  }

  function answer(said: Said): void {
    const item = current.value;
    // Nothing is answered that nobody has seen, and no press is dropped without a word.
    if (!item || place.isWaiting.value) {
      void announce(UNSEEN_WORDS);
      return;
    }
    const facts = factsOf(item);
    const changes = [{ candidateId: item.candidate.id, before: sayingOf(item), after: said }];
    answers.give({ name: nameOf(item, said), rank: item.rank, atMs: Date.now(), changes }, facts);
    last.value = said;
    pace.value = afterAnswer(pace.value, { atMs: Date.now(), tookMs: facts.tookMs ?? 0 });
    void announce(nameOf(item, said));
    void place.advance();
  }

  function answerEvent(classKey: string, isLessSure: boolean): void {
    const confidence: Confidence = isLessSure ? 'probable' : 'sure';
    answer({ verdict: 'event', classKey, confidence });
  }

  const plain = (verdict: 'no-event' | 'undecided') => () =>
    answer({ verdict, classKey: null, confidence: null });

  function sameAsLast(): void {
    if (last.value) answer(last.value);
    else void announce('Nothing has been answered yet');
  }

  /** The rest of the group, as its example and all spot checks were answered. */
  function answerRest(): void {
    const alike = lookAlikes.value;
    if (alike?.state !== 'ready' || !alike.agreed || alike.rest.length === 0) return;
    const { agreed, rest, group } = alike;
    const name = `${formatCount(rest.length, 'look-alike')}: ${sayingWords(agreed, scheme.classes)}`;
    const changes = rest.map(({ candidate }) => ({ candidateId: candidate.id, before: null, after: agreed }));
    const told = { aids: null, view: null, groupKey: group.key, isLookedAt: false, tookMs: null };
    answers.give({ name, rank: rest[0]?.rank ?? group.firstRank, atMs: Date.now(), changes }, told);
    void announce(name);
    void place.advance();
  }

  function goBackTo(step: RoundStep | null, words: string): boolean {
    if (!step) return false;
    void announce(`${words}: ${step.name}`);
    void place.jumpTo(step.rank);
    return true;
  }

  useEventListener(window, 'online', () => {
    if (place.trouble.value) void place.advance();
    else if (startProblem.value) void start();
  });

  const answered = computed(() => answeredCount(items.progress.value));
  return {
    settings,
    isReady,
    startProblem,
    order: items.order,
    isReplaced: items.isReplaced,
    progress: items.progress,
    answered,
    progressText: computed(() =>
      progressWords(
        items.progress.value,
        minutesLeft(pace.value, items.progress.value.candidates - answered.value),
      ),
    ),
    ...place,
    ...showing.heard,
    said: computed(() => sayingOf(current.value)),
    last,
    lookAlikes,
    packets: answers.packets,
    undecided: answers.undecided,
    decide: answers.decide,
    retry: answers.retry,
    saving: computed(() =>
      answerSaveWords({
        packets: answers.packets.value,
        halt: answers.halt.value,
        isKept: answers.isKept.value,
        answered: answered.value,
      }),
    ),
    isAllStored: computed(() => answers.packets.value.length === 0),
    isRestDue: computed(() => settings.value.isRestTold && pace.value.workedMs >= REST_AFTER_MS),
    workedMs: computed(() => pace.value.workedMs),
    rest: () => (pace.value = rested(pace.value)),
    lastStep: answers.lastStep,
    start,
    answerEvent,
    noEvent: plain('no-event'),
    undecidedNow: plain('undecided'),
    sameAsLast,
    answerRest,
    undo: () => goBackTo(answers.undo(), 'Taken back'),
    redo: () => goBackTo(answers.redo(), 'Done again'),
  };
}
