import { useDevicePixelRatio } from '@vueuse/core';
import { computed, ref } from 'vue';
import type { Ref } from 'vue';
import type { TileLayout } from '@shared/contract/views.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { useCandidates } from '@/composables/bench/useCandidates.ts';
import { usePeaks } from '@/composables/bench/usePeaks.ts';
import { useQuiet } from '@/composables/bench/useQuiet.ts';
import { useTiles } from '@/composables/bench/useTiles.ts';

export interface BenchSourcesOptions {
  recordingId: string;
  layout: TileLayout;
  window: Ref<TimeWindow>;
  areCandidatesShown: boolean;
}

const FIRST_WIDTH_PX = 800;

/** What the server sends for the part that is shown: tiles, peaks, candidates. */
export function useBenchSources({ recordingId, layout, window, areCandidatesShown }: BenchSourcesOptions) {
  const channel = ref(0);
  const plotWidthPx = ref(FIRST_WIDTH_PX);
  const { pixelRatio } = useDevicePixelRatio();
  const widthPx = computed(() => Math.round(plotWidthPx.value * pixelRatio.value));
  const place = { recordingId, channel, window, widthPx };
  const tiles = useTiles({ ...place, layout });
  return {
    channel,
    /** Width of the plots in CSS pixels, and in those of the screen. */
    plotWidthPx,
    widthPx,
    tiles,
    ...useQuiet({ layout, window, find: tiles.find }),
    peaks: usePeaks({ ...place, frames: layout.frames }),
    candidates: useCandidates({ recordingId, isShown: areCandidatesShown, window }),
  };
}
