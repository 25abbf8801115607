import type { PictureBand } from '../../shared/contract/views.ts';

/** Frames of a level below 0. */
export interface FinerGrid {
  frameSamples: number;
  hop: number;
}

/** The shortest frame of the ultrasonic picture: at 192 kHz 167 microseconds, half of which is where its window weighs most. */
const LEAST_ULTRASONIC_FRAME = 32;
/** An audible frame of an eighth is 1.3 ms, which still parts tones 3 kHz from each other; shorter ones would part none. */
const AUDIBLE_FINER_LEVELS = 3;

/** How many levels below 0 say more than the one above them. @param size samples of a frame of level 0, a power of two. */
export function finerLevelsOf(band: PictureBand, size: number): number {
  if (band === 'audible') return AUDIBLE_FINER_LEVELS;
  return Math.max(0, Math.log2(size / LEAST_ULTRASONIC_FRAME));
}

/**
 * Level -n: the hop is a quarter of that of the level above and the frame a half, so that time is told more finely at each
 * step while neighbouring frames overlap more and more: hop = size / 2 / 4^n, frame = size / 2^n.
 *
 * @param size samples of a frame of level 0.
 * @param level below 0.
 */
export function finerGrid(size: number, level: number): FinerGrid {
  return { frameSamples: size * 2 ** level, hop: (size / 2) * 4 ** level };
}

/**
 * First sample of a frame. It is centred on its hop as those of level 0 are, and the ones that would stand out at either end
 * are moved inside; the window weighs most at first + frame / 2.
 */
export function finerFrameStart({ frameSamples, hop }: FinerGrid, index: number, frames: number): number {
  const centred = index * hop + Math.floor(hop / 2) - frameSamples / 2;
  return Math.max(0, Math.min(centred, frames - frameSamples));
}
