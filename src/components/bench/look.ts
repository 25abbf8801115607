import { colourMaps } from '@/theme/colour-maps.ts';
import type { ColourMapName } from '@/theme/colour-maps.ts';

/** How levels become colours; changed at once, without asking the server. */
export interface Look {
  map: ColourMapName;
  /** The quietest colour stands this far over the quiet of a band, dB. */
  floorOverQuietDb: number;
  /** From the quietest to the loudest colour, dB. */
  rangeDb: number;
  /** Every bin over its own quiet: hum and other steady lines vanish, clicks stay. */
  isOverQuiet: boolean;
}

export const FIRST_LOOK: Look = { map: 'frost', floorOverQuietDb: -3, rangeDb: 46, isOverQuiet: false };

/** The map after the present one, around and around. */
export function nextColours(look: Look): Look {
  const names = Object.keys(colourMaps) as ColourMapName[];
  const next = names[(names.indexOf(look.map) + 1) % names.length] ?? 'frost';
  return { ...look, map: next };
}

export function otherView(look: Look): Look {
  return { ...look, isOverQuiet: !look.isOverQuiet };
}
