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
const SETTLE_MS = 70;
const MOST_POINTS = 8192;

/** Peaks of the window; the last ones stay until finer or further ones are here. */
export function usePeaks({ recordingId, frames, channel, window, widthPx }: PeaksOptions) {
  const peaks = shallowRef<Peaks | null>(null);
  const error = shallowRef<unknown>(null);
  let underway: AbortController | null = null;

  function spanOf(shown: TimeWindow) {
    const room = windowSamples(shown) * ROOM;
    const startSample = Math.max(0, Math.floor(shown.startSample - room));
    const endSample = Math.min(frames, Math.max(startSample + 1, Math.ceil(shown.endSample + room)));
    const share = (endSample - startSample) / windowSamples(shown);
    const points = Math.min(MOST_POINTS, Math.max(1, Math.ceil(toValue(widthPx) * share)));
    return { channel: toValue(channel), startSample, endSample, points };
  }

  async function fetchPeaks(): Promise<void> {
    underway?.abort();
    underway = new AbortController();
    const { signal } = underway;
    try {
      peaks.value = await getPeaks(recordingId, spanOf(toValue(window)), signal);
      error.value = null;
    } catch (problem) {
      if (!signal.aborted) error.value = problem;
    }
  }

  const fetchSoon = useDebounceFn(fetchPeaks, SETTLE_MS, { maxWait: 250 });
  watch(
    () => [toValue(window), toValue(channel), toValue(widthPx)] as const,
    () => void fetchSoon(),
    { immediate: true },
  );
  onScopeDispose(() => underway?.abort());

  return { peaks, error };
}
