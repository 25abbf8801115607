import { useLocalStorage } from '@vueuse/core';
import { onScopeDispose, ref, watch } from 'vue';
import type { OnsetAnswer } from '@shared/contract/onset.ts';
import { pickOnset } from '@/api/onsets.ts';
import { isProblem } from '@/api/problem-error.ts';
import type { BenchMark, MarkFields } from '@/composables/bench/mark.ts';
import { timeWords } from '@/composables/bench/mark-words.ts';
import { zoomUncertainty } from '@/composables/bench/marking/onset-words.ts';
import type { BenchMarks } from '@/composables/bench/useBenchMarks.ts';
import type { MarkRoom } from '@/composables/pass/mark-room.ts';
import { useAnnounce } from '@/composables/useAnnounce.ts';

/** Asked for, an answer is waited for; unasked, a mark does not move any more after so long. */
const ASKED_MS = 15_000;
const UNASKED_MS = 1500;

interface Asked {
  mark: BenchMark;
  answer: OnsetAnswer | null;
  /** Why there is no answer. */
  problem: string;
}

export interface OnsetSnapParts {
  recordingId: string;
  marks: BenchMarks;
  room: Pick<MarkRoom, 'isOutside'>;
}

/** Moves starts to the onset that is picked on the samples, and back to where the person had put them. */
export function useOnsetSnap({ recordingId, marks, room }: OnsetSnapParts) {
  /** Whether new marks are moved as soon as they are set. */
  const snapsNew = useLocalStorage('recalesce.bench.snap-new', false);
  const isPicking = ref(false);
  /** What came of the last try, beside the mark in hand. */
  const outcome = ref('');
  const leaving = new AbortController();
  const { announce } = useAnnounce();
  onScopeDispose(() => leaving.abort());
  watch(marks.selectedKey, () => (outcome.value = ''));

  async function ask(mark: BenchMark, patienceMs: number): Promise<Asked> {
    const { channel, startSample, endSample, lowHz } = mark;
    const query = { channel, startSample, endSample, ...(lowHz === null ? {} : { lowHz }) };
    try {
      const signal = AbortSignal.any([leaving.signal, AbortSignal.timeout(patienceMs)]);
      return { mark, answer: await pickOnset(recordingId, query, signal), problem: '' };
    } catch (error) {
      const words = isProblem(error) ? error.message : 'The picker did not answer in time.';
      return { mark, answer: null, problem: `${words} The mark stays where you put it.` };
    }
  }

  function tell(words: string): void {
    outcome.value = words;
    void announce(words);
  }

  /** Whoever changed the mark meanwhile is not overruled by an answer about what it was. */
  function isAsItWas({ mark }: Asked): boolean {
    const present = marks.find(mark.key);
    return (
      present?.startSample === mark.startSample &&
      present.endSample === mark.endSample &&
      present.channel === mark.channel
    );
  }

  const isOutside = (onset: number | null | undefined) => typeof onset === 'number' && room.isOutside(onset);

  async function snap(keys: readonly string[], patienceMs = ASKED_MS): Promise<void> {
    const own = marks.ownOf(keys);
    if (own.length === 0) return;
    isPicking.value = true;
    const answers = await Promise.all(own.map((mark) => ask(mark, patienceMs)));
    isPicking.value = false;
    if (leaving.signal.aborted) return;
    const found = answers.filter(
      (one) => isAsItWas(one) && pickedValues(one) !== null && !isOutside(one.answer?.onsetSample),
    );
    const values = new Map(found.map((one) => [one.mark.key, pickedValues(one) ?? {}]));
    const nameOf = (marked: string) => `${marked} moved to the picked onset`;
    marks.changeAll([...values.keys()], ({ key }) => values.get(key) ?? {}, 'snap', nameOf);
    tell(outcomeWords(answers, found));
  }

  function outcomeWords(answers: readonly Asked[], found: readonly Asked[]): string {
    const [first] = answers;
    if (answers.length > 1) return `${found.length} of ${answers.length} marks start at a picked onset`;
    if (!first) return '';
    if (first.problem) return first.problem;
    const onset = first.answer?.onsetSample ?? null;
    if (onset === null) return first.answer?.reason ?? '';
    if (!isAsItWas(first) && found.length === 0)
      return 'The mark was changed meanwhile and stays as you made it.';
    if (onset >= first.mark.endSample) return 'The onset lies after the end of the mark.';
    if (isOutside(onset)) return 'The onset lies outside the windows of this pass.';
    return `Starts at the picked onset, ${timeWords(onset, marks.speech.sampleRateHz)}`;
  }

  function unsnap(keys: readonly string[]): void {
    const moved = keys.filter((key) => typeof marks.find(key)?.rawStartSample === 'number');
    if (moved.length === 0) return tell('The start stands where you put it.');
    marks.changeAll(moved, putBack, 'unsnap', (marked) => `${marked} moved back to where it was put`);
    tell('The start stands again where you put it.');
  }

  return {
    snapsNew,
    isPicking,
    outcome,
    snap,
    unsnap,
    /** After a mark was set: only where that is switched on, and only while it is fresh. */
    async snapFresh(key: string): Promise<void> {
      if (snapsNew.value && marks.find(key)?.origin === 'hand') await snap([key], UNASKED_MS);
    },
  };
}

/** The place the person chose is kept, also where the same mark is picked twice. */
function pickedValues({ mark, answer }: Asked): Partial<MarkFields> | null {
  const onset = answer?.onsetSample ?? null;
  if (onset === null || onset >= mark.endSample) return null;
  return {
    startSample: onset,
    rawStartSample: mark.rawStartSample ?? mark.startSample,
    uncertaintySamples: answer?.uncertaintySamples ?? null,
  };
}

function putBack(mark: BenchMark): Partial<MarkFields> {
  if (mark.rawStartSample === null) return {};
  const startSample = Math.min(mark.rawStartSample, mark.endSample - 1);
  const uncertaintySamples = mark.view ? zoomUncertainty(mark.view) : null;
  return { startSample, rawStartSample: null, uncertaintySamples };
}
