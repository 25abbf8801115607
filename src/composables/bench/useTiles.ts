import { tryOnScopeDispose, useDebounceFn, useThrottleFn } from '@vueuse/core';
import { shallowRef, toValue, watch } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { getTile } from '@/api/views.ts';
import { planTiles } from '@/composables/bench/tile-plan.ts';
import type { Heading } from '@/composables/bench/tile-plan.ts';
import { createTileStore } from '@/composables/bench/tile-store.ts';
import type { KnownTile, TileRequest } from '@/composables/bench/tile-store.ts';
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
  /** Fetched before the bench was there, so that it opens with a picture. */
  known?: readonly KnownTile[];
}

export interface TileTrouble {
  /** Tiles that are wanted and could not be had yet; they are asked for again. */
  count: number;
  error: unknown;
}

/** A part that will be shown without any movement to it. */
export interface UpcomingPart {
  window: TimeWindow;
  channel: number;
}

const BETWEEN_PLANS_MS = 50;
/** After that long without a movement the window is taken to stay where it is. */
const REST_MS = 200;

/** Where the window goes, as far as it keeps its length. A jump to another place goes nowhere. */
export function headingOf(now: TimeWindow, before: TimeWindow): Heading {
  const isSameZoom = Math.abs(windowSamples(now) / windowSamples(before) - 1) < 1e-6;
  const moved = Math.abs(now.startSample - before.startSample);
  if (!isSameZoom || moved === 0 || moved > windowSamples(now)) return 0;
  return now.startSample > before.startSample ? 1 : -1;
}

/** Fetches the tiles that the window needs. `arrivals` counts what has come, so that the picture is drawn again. */
export function useTiles({ recordingId, layout, channels, window, widthPx, known = [] }: TilesOptions) {
  const arrivals = shallowRef(0);
  /** What will be shown next, in that order: fetched right behind what is shown. */
  const upcoming = shallowRef<readonly UpcomingPart[]>([]);
  const trouble = shallowRef<TileTrouble>({ count: 0, error: null });
  const store = createTileStore({
    known,
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
    // Where it is known what comes next, nothing is fetched beside the window unless it moves.
    const isWaiting = upcoming.value.length > 0 && heading === 0;
    return [
      ...roots,
      ...plans.flatMap(({ place, shown: tiles }) => tiles.map((tile) => ({ ...place, ...tile }))),
      ...upcoming.value.flatMap(lanesOf).flatMap(tilesOf),
      ...(isWaiting ? [] : plans.flatMap(({ place, ahead }) => ahead.map((tile) => ({ ...place, ...tile })))),
    ];
  }

  /** Stacked channels are shown together. */
  function lanesOf({ window: part, channel }: UpcomingPart): UpcomingPart[] {
    const stacked = toValue(channels);
    const lanes = stacked.includes(channel) ? stacked : [channel];
    return lanes.map((lane) => ({ window: part, channel: lane }));
  }

  /** The tiles that show a part whole, at the level that its zoom asks for. */
  function tilesOf({ window: part, channel }: UpcomingPart): TileRequest[] {
    const samplesPerPixel = windowSamples(part) / Math.max(1, toValue(widthPx));
    return layout.pictures.flatMap((picture) =>
      planTiles(picture, part, samplesPerPixel, 0).shown.map((tile) => ({
        channel,
        band: picture.band,
        ...tile,
      })),
    );
  }

  /** Whether all of the window is there. */
  function isWhole(): boolean {
    const parts = toValue(channels).map((channel) => ({ window: toValue(window), channel }));
    return parts.flatMap(tilesOf).every((request) => store.find(request) !== undefined);
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
  const wantAtRest = useDebounceFn(wantNow, REST_MS);
  wantNow();
  watch(
    () => [toValue(window), toValue(channels), toValue(widthPx), upcoming.value] as const,
    () => {
      void wantSoon();
      void wantAtRest();
    },
  );
  // The browser knows first that the connection is back.
  globalThis.addEventListener('online', store.retry);
  tryOnScopeDispose(() => {
    globalThis.removeEventListener('online', store.retry);
    store.close();
  });

  return { find, isWhole, arrivals, trouble, upcoming, retry: store.retry };
}
