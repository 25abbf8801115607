import { computed, nextTick, ref, shallowRef } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import type { RoundItem } from '@shared/contract/rounds.ts';
import { heardWords } from '@/composables/bench/listening-words.ts';
import type { Bench } from '@/composables/bench/useBench.ts';
import { pitchHz, playSpanOf, slowOf, windowOf } from '@/composables/rounds/round-view.ts';
import type { AnswerFacts } from '@/composables/rounds/useRoundAnswers.ts';

export interface RoundSettings {
  isPlayedAtOnce: boolean;
  isSlowSuited: boolean;
  isRestTold: boolean;
}
export const FIRST_SETTINGS: RoundSettings = { isPlayedAtOnce: true, isSlowSuited: true, isRestTold: true };

const LONGEST_TAKEN_MS = 86_400_000;

type ShowingParts = Pick<
  Bench,
  'view' | 'listening' | 'layout' | 'channel' | 'channels' | 'tiles' | 'circumstances' | 'selectCandidate'
>;

/** How a candidate is put before eyes and ears, and what is told about that with its answer. */
export function useShowing(bench: ShowingParts, settings: Ref<RoundSettings>) {
  const { view, listening, layout, channel } = bench;
  const { frames, sampleRateHz } = layout;
  const shown = shallowRef<Candidate | null>(null);
  /** The channel that somebody chose, to go back to. */
  const chosenChannel = ref(channel.value);
  let shownAtMs = 0;

  function show({ candidate }: RoundItem): void {
    if (channel.value !== shown.value?.channel) chosenChannel.value = channel.value;
    shown.value = candidate;
    shownAtMs = performance.now();
    channel.value = candidate.channel;
    view.show(windowOf(candidate, frames));
    bench.selectCandidate(candidate);
    void play(candidate);
  }

  /** How a candidate is heard: as somebody has set it, or as suits its frequency. */
  function aidsFor(candidate: Candidate): ListeningAids {
    if (!settings.value.isSlowSuited) return listening.aids.value;
    const slow = slowOf(candidate);
    const mode = slow === 1 ? 'as-recorded' : 'slowed';
    return { mode, slow, carrierHz: null, gate: listening.gate.value };
  }

  const spanOf = (candidate: Candidate, { slow }: ListeningAids) =>
    playSpanOf(candidate, { frames, sampleRateHz, slow });

  async function play(candidate: Candidate): Promise<void> {
    listening.stop();
    if (!settings.value.isPlayedAtOnce) return;
    const aids = aidsFor(candidate);
    listening.mode.value = aids.mode;
    if (settings.value.isSlowSuited) listening.slow.value = slowOf(candidate);
    // A change of the slow-down stops what plays, as soon as it is noticed.
    await nextTick();
    if (shown.value === candidate) await listening.playPrefetched(spanOf(candidate, aids));
  }

  /** What comes next is fetched while this one is looked at: going on shows and plays it at once. */
  function prepare(items: readonly RoundItem[]): void {
    bench.tiles.upcoming.value = items.map(({ candidate }) => ({
      window: windowOf(candidate, frames),
      channel: candidate.channel,
    }));
    const next = items[0]?.candidate;
    if (!next || !settings.value.isPlayedAtOnce) return;
    const aids = aidsFor(next);
    listening.prefetch(spanOf(next, aids), { aids, channel: next.channel });
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

  /** Which channel heard the candidate, where there are several; and the other one to look at: the one chosen before, or back. */
  const heardBy = computed(() => {
    if (!shown.value || layout.channels < 2) return null;
    const { channel: heard } = shown.value;
    const isShown = channel.value === heard;
    const other = isShown ? chosenChannel.value : heard;
    return { channel: heard, shown: channel.value, other: other === channel.value ? null : other };
  });

  const heardText = computed(() => {
    const candidate = shown.value;
    if (!candidate || !settings.value.isPlayedAtOnce) return '';
    return `${heardWords(listening.aids.value, sampleRateHz, pitchHz(candidate))}.`;
  });

  return {
    show,
    prepare,
    factsOf,
    /** For whoever looks and listens: how it is heard, empty where nothing is played, and on which channel. */
    heard: { heardText, heardBy, showChannel: (next: number) => bench.channels.choose(next) },
  };
}
