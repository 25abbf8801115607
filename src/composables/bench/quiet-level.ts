import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '@shared/audio/tile.ts';
import type { Tile } from '@shared/audio/tile.ts';

/**
 * The level that half of the codes stay under, in dB re full scale. Digital silence (code 0) does not count; `null` where
 * there is nothing else.
 */
export function medianLevelDb(codes: ArrayLike<number>): number | null {
  const counts = new Uint32Array(256);
  for (let index = 0; index < codes.length; index++) counts[codes[index]!]!++;
  const sounding = codes.length - (counts[0] ?? 0);
  if (sounding === 0) return null;
  let seen = 0;
  for (let code = 1; code < 256; code++) {
    seen += counts[code] ?? 0;
    if (seen * 2 >= sounding) return TILE_MINIMUM_DB + code * TILE_DB_PER_CODE;
  }
  return null;
}

/** The quiet on which a burst stands out, as far as one tile tells it. */
export function quietLevelDb(tile: Tile): number | null {
  return medianLevelDb(tile.codes);
}
