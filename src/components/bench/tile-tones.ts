import { colourMapTable, COLOUR_STEPS } from '@/theme/colour-maps.ts';
import type { ColourMapName } from '@/theme/colour-maps.ts';
import { QUIET_CODE } from '@/components/bench/compose-band.ts';
import { TILE_DB_PER_CODE, TILE_MINIMUM_DB } from '@shared/audio/tile.ts';

export interface Tones {
  map: ColourMapName;
  /** Shown as the quietest colour, dB re full scale. */
  floorDb: number;
  /** From the quietest to the loudest colour, dB. */
  rangeDb: number;
}

/** The pixel of each of the 256 codes of a tile. */
export function toneTable(tones: Tones): Uint32Array {
  return tableOf(256, tones, (code) => TILE_MINIMUM_DB + code * TILE_DB_PER_CODE);
}

/** The pixel of each code over the quiet of its bin; `floorDb` is then over the quiet too. */
export function overQuietTable(tones: Tones): Uint32Array {
  return tableOf(256 + QUIET_CODE, tones, (code) => (code - QUIET_CODE) * TILE_DB_PER_CODE);
}

function tableOf(
  codes: number,
  { map, floorDb, rangeDb }: Tones,
  levelOf: (code: number) => number,
): Uint32Array {
  const colours = colourMapTable(map);
  return Uint32Array.from({ length: codes }, (_, code) => {
    const share = (levelOf(code) - floorDb) / Math.max(1, rangeDb);
    const step = Math.round(Math.min(1, Math.max(0, share)) * (COLOUR_STEPS - 1));
    return colours[step] ?? 0;
  });
}

/** Level of a code, dB re full scale. */
export function levelOfCode(code: number): number {
  return TILE_MINIMUM_DB + code * TILE_DB_PER_CODE;
}
