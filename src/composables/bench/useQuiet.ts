import { toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, TileLayout } from '@shared/contract/views.ts';
import { quietLevelDb } from '@/composables/bench/quiet-level.ts';
import { tilesOfWindow } from '@/composables/bench/tile-plan.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface QuietOptions {
  layout: TileLayout;
  window: MaybeRefOrGetter<TimeWindow>;
  find: (band: PictureBand, level: number, tile: number) => Tile | undefined;
}

const FALLBACK_QUIET_DB = -100;

/**
 * What counts as quiet in a band at a level of its tiles, dB re full scale. It is taken once, from the first tiles
 * that come, so that colours stay as they are while the window moves; maxima make coarser levels louder.
 */
export function useQuiet({ layout, window, find }: QuietOptions) {
  const known = new Map<string, number>();

  function quietIn(band: PictureBand, level: number): number | undefined {
    const picture = layout.pictures.find((one) => one.band === band);
    const places = picture && level < picture.levels ? tilesOfWindow(picture, toValue(window), level) : [];
    const tiles = places.map(({ tile }) => find(band, level, tile)).filter((tile) => tile !== undefined);
    return tiles.map(quietLevelDb).find((value) => value !== null) ?? undefined;
  }

  /** The picture that stands in until the wanted level is here. */
  function coarserQuiet(band: PictureBand, level: number): number | undefined {
    const coarser = [1, 2, 3, 4].map((further) => quietIn(band, level + further));
    return coarser.find((value) => value !== undefined);
  }

  function quietOf(band: PictureBand, level: number): number {
    const key = `${band}/${level}`;
    const kept = known.get(key);
    if (kept !== undefined) return kept;
    const levelDb = quietIn(band, level);
    if (levelDb !== undefined) known.set(key, levelDb);
    return levelDb ?? coarserQuiet(band, level) ?? FALLBACK_QUIET_DB;
  }

  return { quietOf };
}
