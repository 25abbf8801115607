import { useDevicePixelRatio } from '@vueuse/core';
import { computed, ref } from 'vue';
import type { Ref } from 'vue';
import type { TileLayout } from '@shared/contract/views.ts';
import type { KnownTile } from '@/composables/bench/tile-store.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';
import { useCandidates } from '@/composables/bench/useCandidates.ts';
import { useChannels } from '@/composables/bench/useChannels.ts';
import { usePeaks } from '@/composables/bench/usePeaks.ts';
import { useQuiet } from '@/composables/bench/useQuiet.ts';
import { useTiles } from '@/composables/bench/useTiles.ts';

export interface BenchSourcesOptions {
  recordingId: string;
  layout: TileLayout;
  firstTiles: readonly KnownTile[];
  window: Ref<TimeWindow>;
  areCandidatesShown: boolean;
}

const FIRST_WIDTH_PX = 800;

/** What the server sends for the part that is shown: tiles, what is quiet in them, peaks, candidates. */
export function useBenchSources(options: BenchSourcesOptions) {
  const { recordingId, layout, firstTiles, window, areCandidatesShown } = options;
  const channels = useChannels(layout.channels);
  const { channel } = channels;
  const plotWidthPx = ref(FIRST_WIDTH_PX);
  const { pixelRatio } = useDevicePixelRatio();
  const widthPx = computed(() => Math.round(plotWidthPx.value * pixelRatio.value));
  const place = { recordingId, window, widthPx };
  const tiles = useTiles({ ...place, layout, channels: channels.shown, known: firstTiles });
  return {
    channel,
    channels,
    /** Width of the plots in CSS pixels, and in those of the screen. */
    plotWidthPx,
    widthPx,
    tiles,
    ...useQuiet({ recordingId, layout, window, channels: channels.shown, find: tiles.find }),
    peaks: usePeaks({ ...place, channel, frames: layout.frames }),
    candidates: useCandidates({ recordingId, isShown: areCandidatesShown, window }),
  };
}
