import { tryOnScopeDispose } from '@vueuse/core';
import { shallowRef } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { getTile } from '@/api/views.ts';
import { planTiles } from '@/composables/bench/tile-plan.ts';
import { createTileStore } from '@/composables/bench/tile-store.ts';
import type { TileRequest } from '@/composables/bench/tile-store.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

/** A part that will be drawn, so many pixels wide. */
export interface WantedPart {
  channel: number;
  window: TimeWindow;
  widthPx: number;
}

/** Tiles of several parts at once, for small pictures. */
export function useThumbTiles(recordingId: string, layout: TileLayout) {
  const arrivals = shallowRef(0);
  const store = createTileStore({
    load: (request, signal) => getTile({ recordingId, ...request }, signal),
    onChange: () => arrivals.value++,
    capacity: 200,
    parallel: 3,
  });

  function tilesOf({ channel, window, widthPx }: WantedPart): TileRequest[] {
    const samplesPerPixel = windowSamples(window) / Math.max(1, widthPx);
    return layout.pictures.flatMap((picture) =>
      planTiles(picture, window, samplesPerPixel).shown.map((tile) => ({
        band: picture.band,
        channel,
        ...tile,
      })),
    );
  }

  tryOnScopeDispose(() => store.close());
  return {
    arrivals,
    want: (parts: readonly WantedPart[]) => store.want(parts.flatMap(tilesOf)),
    find: (channel: number, band: PictureBand, level: number, tile: number): Tile | undefined =>
      store.find({ channel, band, level, tile }),
  };
}

export type ThumbTiles = ReturnType<typeof useThumbTiles>;
