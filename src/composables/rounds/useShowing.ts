import { nextTick } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { RoundItem } from '@shared/contract/rounds.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { playSpanOf, slowOf, windowOf } from '@/composables/rounds/round-view.ts';
import type { AnswerFacts } from '@/composables/rounds/useRoundAnswers.ts';

export interface RoundSettings {
  isPlayedAtOnce: boolean;
  isSlowSuited: boolean;
  isRestTold: boolean;
}
export const FIRST_SETTINGS: RoundSettings = { isPlayedAtOnce: true, isSlowSuited: true, isRestTold: true };

const LONGEST_TAKEN_MS = 86_400_000;

/** How a candidate is put before eyes and ears, and what is told about that with its answer. */
export function useShowing(bench: Bench, settings: Ref<RoundSettings>) {
  const { view, listening, layout } = bench;
  const { frames, sampleRateHz } = layout;
  let shown: Candidate | null = null;
  let shownAtMs = 0;

  function show({ candidate }: RoundItem): void {
    shown = candidate;
    shownAtMs = performance.now();
    bench.channel.value = candidate.channel;
    view.show(windowOf(candidate, frames));
    bench.selectCandidate(candidate);
    void play(candidate);
  }

  async function play(candidate: Candidate): Promise<void> {
    listening.stop();
    if (!settings.value.isPlayedAtOnce) return;
    if (settings.value.isSlowSuited) listening.slow.value = slowOf(candidate);
    // A change of the slow-down stops what plays, as soon as it is noticed.
    await nextTick();
    if (shown !== candidate) return;
    await listening.play(playSpanOf(candidate, { frames, sampleRateHz, slow: listening.slow.value }));
  }

  /** The next one is fetched while this one is looked at: going on shows it at once. */
  function prepare(item: RoundItem | null): void {
    const { candidate } = item ?? {};
    bench.tiles.next.value = candidate
      ? { window: windowOf(candidate, frames), channel: candidate.channel }
      : null;
  }

  function factsOf({ groupKey }: RoundItem): AnswerFacts {
    const { circumstances } = bench;
    const tookMs = Math.max(0, Math.round(performance.now() - shownAtMs));
    return {
      aids: circumstances.aidsInUse(),
      view: circumstances.viewNow(),
      groupKey,
      isLookedAt: true,
      tookMs: tookMs <= LONGEST_TAKEN_MS ? tookMs : null,
    };
  }

  return { show, prepare, factsOf };
}
