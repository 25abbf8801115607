import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '@shared/audio/tile.ts';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureBand, PictureLayout } from '@shared/contract/views.ts';
import { HEARING_LINE_HZ } from '@/composables/bench/hearing-line.ts';
import { columnsAtLevel, columnSamples, levelFor } from '@/composables/bench/tile-plan.ts';

export interface LevelPlace {
  channel: number;
  sample: number;
  hz: number;
}

export interface LevelSources {
  pictures: readonly PictureLayout[];
  samplesPerPixel: number;
  find: (channel: number, band: PictureBand, level: number, tile: number) => Tile | undefined;
  quietBins: (
    channel: number,
    band: PictureBand,
  ) => ((level: number) => ArrayLike<number> | undefined) | undefined;
}

export interface LevelUnder {
  /** Of the loudest column under the pixel, dB re full scale. */
  levelDb: number;
  /** Over what is quiet in this bin; `null` until that is known. */
  overQuietDb: number | null;
}

/** The level that the picture shows at a place, in the finest level that is here; `null` where nothing is. */
export function levelUnder({ channel, sample, hz }: LevelPlace, sources: LevelSources): LevelUnder | null {
  const wanted = hz >= HEARING_LINE_HZ ? 'ultrasonic' : 'audible';
  const layout = sources.pictures.find(({ band }) => band === wanted);
  if (!layout) return null;
  const { band, bins, lowHz, highHz, levels } = layout;
  const bin = Math.min(bins - 1, Math.max(0, Math.floor(((hz - lowHz) / (highHz - lowHz)) * bins)));
  for (let level = levelFor(layout, sources.samplesPerPixel); level < levels; level++) {
    const find = (tile: number) => sources.find(channel, band, level, tile);
    const code = loudestCode(layout, { level, bin, sample }, sources.samplesPerPixel, find);
    if (code === null) continue;
    const quiet = sources.quietBins(channel, band)?.(level)?.[bin];
    return {
      levelDb: TILE_MINIMUM_DB + code * TILE_DB_PER_CODE,
      overQuietDb: quiet === undefined ? null : (code - quiet) * TILE_DB_PER_CODE,
    };
  }
  return null;
}

function loudestCode(
  layout: PictureLayout,
  { level, bin, sample }: { level: number; bin: number; sample: number },
  samplesPerPixel: number,
  find: (tile: number) => Tile | undefined,
): number | null {
  const samples = columnSamples(layout, level);
  const last = columnsAtLevel(layout, level) - 1;
  const from = Math.min(last, Math.max(0, Math.floor(sample / samples)));
  const to = Math.min(last, Math.max(from, Math.ceil((sample + samplesPerPixel) / samples) - 1));
  let loudest = 0;
  for (let column = from; column <= to; column++) {
    const index = Math.floor(column / layout.columnsPerTile);
    const tile = find(index);
    if (!tile) return null;
    const code = tile.codes[(column - index * layout.columnsPerTile) * layout.bins + bin] ?? 0;
    loudest = Math.max(loudest, code);
  }
  return loudest;
}
