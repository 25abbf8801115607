import { colourMapTable, COLOUR_STEPS } from '@/theme/colour-maps.ts';
import type { ColourMapName } from '@/theme/colour-maps.ts';
import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '@shared/audio/tile.ts';

export interface Tones {
  map: ColourMapName;
  /** Shown as the quietest colour, dB re full scale. */
  floorDb: number;
  /** From the quietest to the loudest colour, dB. */
  rangeDb: number;
}

/** The pixel of each of the 256 codes of a tile. */
export function toneTable({ map, floorDb, rangeDb }: Tones): Uint32Array {
  const colours = colourMapTable(map);
  return Uint32Array.from({ length: 256 }, (_, code) => {
    const share = (TILE_MINIMUM_DB + code * TILE_DB_PER_CODE - floorDb) / Math.max(1, rangeDb);
    const step = Math.round(Math.min(1, Math.max(0, share)) * (COLOUR_STEPS - 1));
    return colours[step] ?? 0;
  });
}

/** Level of a code, dB re full scale. */
export function levelOfCode(code: number): number {
  return TILE_MINIMUM_DB + code * TILE_DB_PER_CODE;
}
