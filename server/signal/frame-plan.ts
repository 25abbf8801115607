import { HEARING_LINE_HZ } from './hearing-line.ts';
import type { Span } from './place-list.ts';

/** Where the frames of one kind lie in a recording. */
export interface FrameGrid {
  /** Samples per frame, a power of two. */
  readonly size: number;
  readonly hop: number;
  /** One frame per started hop. */
  readonly count: number;
}

export interface FramePlan {
  readonly sampleRateHz: number;
  readonly frames: number;
  /** About 10.7 ms: floors, tones, descriptors. */
  readonly long: FrameGrid;
  /** Ultrasonic picture and ultrasonic spans: a burst of 100 microseconds must stand clear of its frame. */
  readonly short: FrameGrid;
  /** The audible picture: `long`, and longer only where the clamp of `long` would leave it too few lines. */
  readonly audible: FrameGrid;
}

const LONG_FRAME_S = 0.0107;
const MINIMUM_LONG_SIZE = 256;
const MAXIMUM_LONG_SIZE = 16384;
const MAXIMUM_AUDIBLE_SIZE = 262144;
const SHORT_SIZE = 256;
const SHORT_SIZE_ABOVE_400_KHZ = 512;

/**
 * Sizes of the frames at a sample rate: N = 2^round(log2(0.0107 s * rate)), clamped; hop N / 2.
 *
 * @param sampleRateHz true rate, above 0.
 * @param frames samples per channel, at least 1.
 * @throws RangeError for values outside.
 */
export function planFrames(sampleRateHz: number, frames: number): FramePlan {
  if (!(sampleRateHz > 0)) throw new RangeError(`sampleRateHz: ${sampleRateHz} is not above 0`);
  if (!Number.isInteger(frames) || frames < 1) throw new RangeError(`frames: ${frames} is not at least 1`);
  const nearest = 2 ** Math.round(Math.log2(LONG_FRAME_S * sampleRateHz));
  const longSize = Math.min(Math.max(nearest, MINIMUM_LONG_SIZE), MAXIMUM_LONG_SIZE);
  const audibleSize = Math.min(Math.max(nearest, MINIMUM_LONG_SIZE), MAXIMUM_AUDIBLE_SIZE);
  const shortSize = sampleRateHz > 400_000 ? SHORT_SIZE_ABOVE_400_KHZ : SHORT_SIZE;
  return {
    sampleRateHz,
    frames,
    long: gridOf(longSize, frames),
    short: gridOf(shortSize, frames),
    audible: gridOf(audibleSize, frames),
  };
}

function gridOf(size: number, frames: number): FrameGrid {
  const hop = size / 2;
  return { size, hop, count: Math.ceil(frames / hop) };
}

/**
 * First sample of frame `index`. A frame is centred on its hop, [index * hop, (index + 1) * hop), so that what is
 * drawn there sounded there; the frames at both ends are moved inside, so that none contains invented silence.
 * A recording shorter than one frame has frames from sample 0, the missing samples zero.
 */
export function frameStart(grid: FrameGrid, index: number, frames: number): number {
  const centred = index * grid.hop - grid.hop / 2;
  return Math.max(0, Math.min(centred, frames - grid.size));
}

/** The frames `[first, end)` whose hops begin in a segment. */
export function framesIn(
  { hop }: { hop: number },
  { startSample, endSample }: Span,
): { first: number; end: number } {
  return { first: Math.ceil(startSample / hop), end: Math.ceil(endSample / hop) };
}

/** Bins `[first, end)` of a transform of `size` whose middles lie at or above, or below, the hearing line. */
export function bandBins(
  band: 'audible' | 'ultrasonic',
  size: number,
  sampleRateHz: number,
): { first: number; end: number } {
  const lineBin = Math.ceil((HEARING_LINE_HZ * size) / sampleRateHz - 1e-9);
  const nyquistBin = size / 2;
  const split = Math.min(Math.max(lineBin, 1), nyquistBin);
  return band === 'audible' ? { first: 1, end: split } : { first: split, end: nyquistBin };
}
