import { useDebounceFn } from '@vueuse/core';
import { onScopeDispose, shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Peaks } from '@shared/contract/views.ts';
import { getPeaks } from '@/api/views.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface PeaksOptions {
  recordingId: string;
  frames: number;
  channel: MaybeRefOrGetter<number>;
  window: MaybeRefOrGetter<TimeWindow>;
  widthPx: MaybeRefOrGetter<number>;
}

/** Fetched on both sides beyond the window, as a share of it, so that a pan finds them there. */
const ROOM = 0.5;
/** What has to be left of it, unless the recording ends there. */
const LEAST_ROOM = 0.2;
const SETTLE_MS = 70;
const MOST_POINTS = 8192;
const FIRST_RETRY_MS = 1000;
const LONGEST_RETRY_MS = 30_000;

interface PeaksWanted {
  channel: number;
  window: TimeWindow;
  widthPx: number;
  frames: number;
}

/** Whether peaks that are here show a window as well as new ones would. */
export function sufficeFor(peaks: Peaks, { channel, window, widthPx, frames }: PeaksWanted): boolean {
  const samples = windowSamples(window);
  const room = samples * LEAST_ROOM;
  const endSample = peaks.startSample + peaks.minimum.length * peaks.samplesPerPoint;
  const reachesBack = peaks.startSample <= Math.max(0, window.startSample - room);
  const reachesOn = endSample >= Math.min(frames, window.endSample + room);
  const step = Math.max(1, samples / Math.max(1, widthPx));
  // Much finer ones cost more to draw than to fetch anew.
  const isFineEnough = peaks.samplesPerPoint <= step * 1.01 && peaks.samplesPerPoint >= step / 4;
  return peaks.channel === channel && reachesBack && reachesOn && isFineEnough;
}

/** Peaks of the window; the last ones stay until finer or further ones are here. */
export function usePeaks({ recordingId, frames, channel, window, widthPx }: PeaksOptions) {
  const peaks = shallowRef<Peaks | null>(null);
  const error = shallowRef<unknown>(null);
  let underway: AbortController | null = null;
  let retryAfterMs = FIRST_RETRY_MS;
  let timer: ReturnType<typeof setTimeout> | undefined;

  function spanOf(shown: TimeWindow) {
    const room = windowSamples(shown) * ROOM;
    const startSample = Math.max(0, Math.floor(shown.startSample - room));
    const endSample = Math.min(frames, Math.max(startSample + 1, Math.ceil(shown.endSample + room)));
    const share = (endSample - startSample) / windowSamples(shown);
    const points = Math.min(MOST_POINTS, Math.max(1, Math.ceil(toValue(widthPx) * share)));
    return { channel: toValue(channel), startSample, endSample, points };
  }

  async function fetchPeaks(): Promise<void> {
    const now = { channel: toValue(channel), window: toValue(window), widthPx: toValue(widthPx), frames };
    if (peaks.value && sufficeFor(peaks.value, now)) return;
    underway?.abort();
    clearTimeout(timer);
    underway = new AbortController();
    const { signal } = underway;
    try {
      peaks.value = await getPeaks(recordingId, spanOf(now.window), signal);
      error.value = null;
      retryAfterMs = FIRST_RETRY_MS;
    } catch (problem) {
      if (!signal.aborted) tryLater(problem);
    }
  }

  function tryLater(problem: unknown): void {
    error.value = problem;
    timer = setTimeout(() => void fetchPeaks(), retryAfterMs);
    retryAfterMs = Math.min(LONGEST_RETRY_MS, 2 * retryAfterMs);
  }

  const fetchSoon = useDebounceFn(fetchPeaks, SETTLE_MS, { maxWait: 250 });
  watch(
    () => [toValue(window), toValue(channel), toValue(widthPx)] as const,
    () => void fetchSoon(),
    { immediate: true },
  );
  onScopeDispose(() => {
    underway?.abort();
    clearTimeout(timer);
  });

  return { peaks, error };
}
