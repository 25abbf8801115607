import { tryOnScopeDispose, useThrottleFn } from '@vueuse/core';
import { shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { getTile } from '@/api/views.ts';
import { planTiles } from '@/composables/bench/tile-plan.ts';
import type { Heading } from '@/composables/bench/tile-plan.ts';
import { createTileStore } from '@/composables/bench/tile-store.ts';
import type { TileRequest } from '@/composables/bench/tile-store.ts';
import { windowSamples } from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface TilesOptions {
  recordingId: string;
  layout: TileLayout;
  /** Those that are shown, the one that is marked first. */
  channels: MaybeRefOrGetter<readonly number[]>;
  window: MaybeRefOrGetter<TimeWindow>;
  /** Pixels of the picture, as the screen has them. */
  widthPx: MaybeRefOrGetter<number>;
}

export interface TileTrouble {
  /** Tiles that are wanted and could not be had yet; they are asked for again. */
  count: number;
  error: unknown;
}

const BETWEEN_PLANS_MS = 50;

/** Where the window goes, as far as it keeps its length. */
export function headingOf(now: TimeWindow, before: TimeWindow): Heading {
  const isSameZoom = Math.abs(windowSamples(now) / windowSamples(before) - 1) < 1e-6;
  if (!isSameZoom || now.startSample === before.startSample) return 0;
  return now.startSample > before.startSample ? 1 : -1;
}

/** Fetches the tiles that the window needs. `arrivals` counts what has come, so that the picture is drawn again. */
export function useTiles({ recordingId, layout, channels, window, widthPx }: TilesOptions) {
  const arrivals = shallowRef(0);
  /** What will be shown next, fetched behind everything else. */
  const next = shallowRef<{ window: TimeWindow; channel: number } | null>(null);
  const trouble = shallowRef<TileTrouble>({ count: 0, error: null });
  const store = createTileStore({
    load: (request, signal) => getTile({ recordingId, ...request }, signal),
    onChange: () => {
      const now = store.failing();
      if (now.count !== trouble.value.count || now.error !== trouble.value.error) trouble.value = now;
      arrivals.value++;
    },
  });

  function wanted(heading: Heading): TileRequest[] {
    const shown = toValue(window);
    const samplesPerPixel = windowSamples(shown) / Math.max(1, toValue(widthPx));
    const plans = toValue(channels).flatMap((channel) =>
      layout.pictures.map((picture) => ({
        place: { channel, band: picture.band },
        ...planTiles(picture, shown, samplesPerPixel, heading),
      })),
    );
    // One tile for each band is the whole recording: it stands in everywhere until the others are here.
    const roots = plans.map(({ place, root }) => ({ ...place, ...root }));
    return [
      ...roots,
      ...plans.flatMap(({ place, shown: tiles }) => tiles.map((tile) => ({ ...place, ...tile }))),
      ...plans.flatMap(({ place, ahead }) => ahead.map((tile) => ({ ...place, ...tile }))),
      ...wantedNext(),
    ];
  }

  /** Whether all of the window is there, at the level that its zoom asks for. */
  function isWhole(): boolean {
    const shown = toValue(window);
    const samplesPerPixel = windowSamples(shown) / Math.max(1, toValue(widthPx));
    return toValue(channels).every((channel) =>
      layout.pictures.every((picture) => {
        const tiles = planTiles(picture, shown, samplesPerPixel, 0).shown;
        return tiles.every((tile) => store.find({ channel, band: picture.band, ...tile }) !== undefined);
      }),
    );
  }

  function wantedNext(): TileRequest[] {
    if (!next.value) return [];
    const { window: part, channel } = next.value;
    const samplesPerPixel = windowSamples(part) / Math.max(1, toValue(widthPx));
    return layout.pictures.flatMap((picture) =>
      planTiles(picture, part, samplesPerPixel, 0).shown.map((tile) => ({
        channel,
        band: picture.band,
        ...tile,
      })),
    );
  }

  function find(channel: number, band: PictureBand, level: number, tile: number): Tile | undefined {
    return store.find({ channel, band, level, tile });
  }

  let lastWindow = toValue(window);
  function wantNow(): void {
    const now = toValue(window);
    store.want(wanted(headingOf(now, lastWindow)));
    lastWindow = now;
    trouble.value = store.failing();
  }

  // While the window moves it is enough to ask a few times for each tile's width: at once, so that a single jump is never
  // left without its tiles, and once more at the end.
  const wantSoon = useThrottleFn(wantNow, BETWEEN_PLANS_MS, true, true);
  wantNow();
  watch(() => [toValue(window), toValue(channels), toValue(widthPx), next.value] as const, wantSoon);
  // The browser knows first that the connection is back.
  globalThis.addEventListener('online', store.retry);
  tryOnScopeDispose(() => {
    globalThis.removeEventListener('online', store.retry);
    store.close();
  });

  return { find, isWhole, arrivals, trouble, next, retry: store.retry };
}
