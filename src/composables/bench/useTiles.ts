import { tryOnScopeDispose, watchDebounced } from '@vueuse/core';
import { shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { getTile } from '@/api/views.ts';
import { planTiles } from '@/composables/bench/tile-plan.ts';
import { createTileStore } from '@/composables/bench/tile-store.ts';
import type { TileRequest } from '@/composables/bench/tile-store.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface TilesOptions {
  recordingId: string;
  layout: TileLayout;
  channel: MaybeRefOrGetter<number>;
  window: MaybeRefOrGetter<TimeWindow>;
  /** Pixels of the picture, as the screen has them. */
  widthPx: MaybeRefOrGetter<number>;
}

const FORGIVE_AFTER_MS = 4000;

/** Fetches the tiles that the window needs. `arrivals` counts what has come, so that the picture is drawn again. */
export function useTiles({ recordingId, layout, channel, window, widthPx }: TilesOptions) {
  const arrivals = shallowRef(0);
  const error = shallowRef<unknown>(null);
  const stop = new AbortController();
  const store = createTileStore({
    load: (request) => getTile({ recordingId, ...request }, stop.signal),
    onArrival: (_request, problem) => {
      error.value = problem;
      arrivals.value++;
    },
  });

  function wanted(): TileRequest[] {
    const shown = toValue(window);
    const samplesPerPixel = windowSamples(shown) / Math.max(1, toValue(widthPx));
    const plans = layout.pictures.map((picture) => ({
      band: picture.band,
      ...planTiles(picture, shown, samplesPerPixel),
    }));
    const place = (band: PictureBand) => ({ band, channel: toValue(channel) });
    return [
      ...plans.flatMap(({ band, shown: tiles }) => tiles.map((tile) => ({ ...place(band), ...tile }))),
      ...plans.flatMap(({ band, ahead }) => ahead.map((tile) => ({ ...place(band), ...tile }))),
    ];
  }

  function find(band: PictureBand, level: number, tile: number): Tile | undefined {
    return store.find({ channel: toValue(channel), band, level, tile });
  }

  watch(
    () => wanted(),
    (requests) => store.want(requests),
    { immediate: true },
  );
  watchDebounced(
    error,
    (problem) => {
      if (problem === null) return;
      store.forgive();
      store.want(wanted());
    },
    { debounce: FORGIVE_AFTER_MS },
  );
  tryOnScopeDispose(() => stop.abort());

  return { find, arrivals, error, isIdle: store.isIdle };
}
