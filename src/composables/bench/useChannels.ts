import { useLocalStorage } from '@vueuse/core';
import { computed, ref } from 'vue';

/** More rows than this are too low to tell anything apart. */
export const MOST_STACKED = 8;

/** The channels under one another: all of them, or of many the eight among which the chosen one is. */
export function stackedChannels(channels: number, chosen: number): number[] {
  const first = Math.floor(chosen / MOST_STACKED) * MOST_STACKED;
  return Array.from({ length: Math.min(MOST_STACKED, channels - first) }, (_, index) => first + index);
}

/** Which channel is marked, heard and measured, and which ones are shown. */
export function useChannels(channels: number) {
  const channel = ref(0);
  const wantsStack = useLocalStorage('recalesce.bench.stacked', false);
  const isStacked = computed({
    get: () => wantsStack.value && channels > 1,
    set: (isWanted: boolean) => (wantsStack.value = isWanted),
  });
  const shown = computed((before?: readonly number[]) => {
    const now = isStacked.value ? stackedChannels(channels, channel.value) : [channel.value];
    // The same list while it says the same, so that nothing is fetched or drawn anew.
    return before?.join() === now.join() ? before : now;
  });

  function choose(next: number): void {
    channel.value = Math.min(channels - 1, Math.max(0, next));
  }

  /** The next or the one before, around and around. */
  function step(by: 1 | -1): void {
    channel.value = (channel.value + by + channels) % channels;
  }

  return { channel, shown, isStacked, choose, step, count: channels };
}

export type BenchChannels = ReturnType<typeof useChannels>;
