import type { Tile } from '@shared/audio/tile.ts';

/**
 * The level that half of a tile stays under, in dB re full scale: the quiet on which a burst stands out. Bins in
 * digital silence (code 0) do not count; `null` where there is nothing else.
 */
export function quietLevelDb(tile: Tile): number | null {
  const counts = new Uint32Array(256);
  for (const code of tile.codes) counts[code] = (counts[code] ?? 0) + 1;
  const sounding = tile.codes.length - (counts[0] ?? 0);
  if (sounding === 0) return null;
  let seen = 0;
  for (let code = 1; code < 256; code++) {
    seen += counts[code] ?? 0;
    if (seen * 2 >= sounding) return tile.minimumDb + code * tile.dbPerCode;
  }
  return null;
}
