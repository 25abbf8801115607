import { computed, onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { Ref } from 'vue';
import type { AudioContainer } from '@shared/audio/audio-format.ts';
import type { ListeningAids } from '@shared/contract/mark-circumstances.ts';
import { isProblem } from '@/api/problem-error.ts';
import { FIRST_LEVEL_DB, gainOf, isPlayedByBrowsers } from '@/composables/bench/listening.ts';
import { createHeardLog } from '@/composables/bench/sound/heard-log.ts';
import { createSoundDeck } from '@/composables/bench/sound/sound-deck.ts';
import { useListeningAids } from '@/composables/bench/sound/useListeningAids.ts';
import { useNoiseProfile } from '@/composables/bench/sound/useNoiseProfile.ts';
import { usePlaying } from '@/composables/bench/sound/usePlaying.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface ListeningOptions {
  recordingId: string;
  sampleRateHz: number;
  channels: number;
  container: AudioContainer;
  channel: Ref<number>;
}

export type Listening = ReturnType<typeof useListening>;

/** A carrier that is dragged is not fetched anew at each place. */
const SETTLED_AFTER_MS = 180;

/** Plays spans of a recording as it is, slowed, shifted and freed of noise, and knows what was heard how. */
export function useListening({ recordingId, sampleRateHz, channels, container, channel }: ListeningOptions) {
  const deck = createSoundDeck(recordingId);
  const log = createHeardLog();
  const state = useListeningAids(sampleRateHz);
  const noise = useNoiseProfile({ recordingId, channel, gate: state.gate });
  const levelDb = ref(FIRST_LEVEL_DB);
  const isLooping = ref(false);
  /** Known only when something was played. */
  const isLimited = ref(true);
  const failure = shallowRef<unknown>(null);
  /** Of several channels a browser would play the mixture. */
  let isOriginalPlayable = isPlayedByBrowsers(container) && channels === 1;

  const playing = usePlaying({
    deck,
    onHeard: log.add,
    onFailure: fail,
    settings: () => ({
      aids: state.aids.value,
      channel: channel.value,
      noise: noise.span.value,
      facts: { sampleRateHz, isOriginalPlayable, isLooping: isLooping.value },
    }),
  });

  async function setLevel(): Promise<void> {
    const chain = await deck.open();
    isLimited.value = chain.isLimited;
    chain.setLevel(gainOf(levelDb.value, chain.isLimited));
  }

  /** Not every form of WAV is played by every browser; the server's rendition always is. */
  async function attempt(start: () => Promise<void>): Promise<void> {
    failure.value = null;
    try {
      await setLevel();
      await start();
    } catch (error) {
      const wasOriginal = isOriginalPlayable && state.aids.value.mode === 'as-recorded';
      if (!wasOriginal || isProblem(error) || isAbort(error)) return fail(error);
      isOriginalPlayable = false;
      await attempt(start);
    }
  }

  function fail(error: unknown): void {
    if (isAbort(error)) return;
    playing.stop();
    failure.value = error;
  }

  const problem = computed(() => noise.problem.value || failureWords(failure.value));

  const heardSettings = computed(() =>
    JSON.stringify([state.aids.value, state.gate.value === 'span' && noise.span.value]),
  );
  let settling: ReturnType<typeof setTimeout> | undefined;
  watch([heardSettings, isLooping, channel], () => {
    failure.value = null;
    clearTimeout(settling);
    if (playing.isPlaying.value) settling = setTimeout(() => void attempt(playing.goOn), SETTLED_AFTER_MS);
  });
  watch(levelDb, () => {
    if (playing.isPlaying.value) void setLevel();
  });
  onScopeDispose(() => {
    clearTimeout(settling);
    playing.stop();
    deck.close();
  });

  return {
    ...state,
    levelDb,
    isLooping,
    isLimited,
    noise,
    problem,
    isPlaying: playing.isPlaying,
    isLoading: playing.isLoading,
    playheadSample: playing.playheadSample,
    play: (span: TimeWindow) => attempt(() => playing.play(span)),
    /** Plays what may have been fetched ahead by `prefetch`. */
    playPrefetched: (span: TimeWindow) => attempt(() => playing.play(span, true)),
    prefetch: (span: TimeWindow, way: { aids: ListeningAids; channel: number }) =>
      void playing.prefetch(span, way),
    stop: playing.stop,
    /** Called with each stretch that was heard, as it goes along. Returns how to end that. */
    onHeard: log.onHeard,
    /** How this span was heard within the last minute, as a mark keeps it; `null` where it was not. */
    aidsInUse: (span: TimeWindow): ListeningAids | null => {
      playing.report();
      return log.aidsFor(span, channel.value);
    },
  };
}

function isAbort(error: unknown): boolean {
  return error instanceof DOMException && error.name === 'AbortError';
}

function failureWords(error: unknown): string {
  if (error === null) return '';
  if (!isProblem(error)) return 'This part cannot be played at the moment.';
  const [field] = error.fields;
  return field ? `This cannot be played: it ${field.message}.` : error.message;
}
