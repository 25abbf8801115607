import { onScopeDispose, ref, shallowRef, watch } from 'vue';
import type { Ref } from 'vue';
import type { AudioContainer } from '@shared/audio/audio-format.ts';
import { audioAddress, listenAddress } from '@/api/views.ts';
import {
  FIRST_LEVEL_DB,
  gainOf,
  isPlayedByBrowsers,
  planPlay,
  sampleHeard,
} from '@/composables/bench/listening.ts';
import type { PlayPlan, SlowFactor } from '@/composables/bench/listening.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface ListeningOptions {
  recordingId: string;
  sampleRateHz: number;
  container: AudioContainer;
  channel: Ref<number>;
}

const FADE_MS = 60;

/** Plays a span through the browser's own player: the file itself, or a slowed rendition made by the server. */
export function useListening({ recordingId, sampleRateHz, container, channel }: ListeningOptions) {
  const audio = new Audio();
  audio.preload = 'none';
  const slow = ref<SlowFactor>(1);
  const levelDb = ref(FIRST_LEVEL_DB);
  const isLooping = ref(false);
  const isPlaying = ref(false);
  const playheadSample = shallowRef<number | null>(null);
  const problem = ref('');
  let plan: PlayPlan | null = null;
  let isOriginalPlayable = isPlayedByBrowsers(container);
  let startedAtMs = 0;
  let frame = 0;

  function addressOf({ source, startSample, endSample, slow: factor }: PlayPlan): string {
    if (source === 'original') return audioAddress(recordingId);
    return listenAddress(recordingId, { channel: channel.value, startSample, endSample, slow: factor });
  }

  async function play(span: TimeWindow): Promise<void> {
    stop();
    problem.value = '';
    const next = planPlay(span, slow.value, { sampleRateHz, isOriginalPlayable });
    plan = next;
    isPlaying.value = true;
    playheadSample.value = next.startSample;
    const address = addressOf(next);
    if (audio.getAttribute('src') !== address) audio.src = address;
    try {
      await seek(next.offsetS);
      if (plan !== next) return;
      audio.volume = 0;
      startedAtMs = performance.now();
      await audio.play();
      frame = requestAnimationFrame(follow);
    } catch (error) {
      if (plan === next) fail(error, span);
    }
  }

  /** The place can be set only once the browser knows how long the sound is. */
  async function seek(offsetS: number): Promise<void> {
    if (audio.readyState < HTMLMediaElement.HAVE_METADATA) {
      audio.load();
      await new Promise<void>((resolve, reject) => {
        audio.addEventListener('loadedmetadata', () => resolve(), { once: true });
        audio.addEventListener('error', () => reject(new Error('The sound cannot be played.')), {
          once: true,
        });
      });
    }
    if (audio.currentTime !== offsetS) audio.currentTime = offsetS;
  }

  function fail(error: unknown, span: TimeWindow): void {
    const wasOriginal = plan?.source === 'original';
    stop();
    if (error instanceof DOMException && error.name === 'AbortError') return;
    if (wasOriginal && isOriginalPlayable) {
      // Not every form of WAV is played by every browser; the server's rendition always is.
      isOriginalPlayable = false;
      void play(span);
      return;
    }
    problem.value = 'This part cannot be played at the moment.';
  }

  function follow(nowMs: number): void {
    if (!plan || !isPlaying.value) return;
    audio.volume = gainOf(levelDb.value) * Math.min(1, Math.max(0, nowMs - startedAtMs) / FADE_MS);
    const sample = sampleHeard(plan, audio.currentTime);
    playheadSample.value = Math.min(sample, plan.endSample);
    if (sample < plan.endSample && !audio.ended) {
      frame = requestAnimationFrame(follow);
      return;
    }
    if (isLooping.value) void play(plan);
    else stop();
  }

  function stop(): void {
    cancelAnimationFrame(frame);
    audio.volume = 0;
    audio.pause();
    isPlaying.value = false;
    plan = null;
  }

  watch(slow, stop);
  onScopeDispose(() => {
    stop();
    audio.removeAttribute('src');
    audio.load();
  });

  return { slow, levelDb, isLooping, isPlaying, playheadSample, problem, play, stop };
}
