import { MINIMUM_FFT_SIZE } from './fft.ts';

/** Most points that a window's band is brought down to. */
export const MOST_POINTS = 128;

/**
 * A kind of window and the damped sines it looks for. Times are in units of 1 / W, frequencies of W, where W is the width of the octave
 * from W to 2 W. `onset` is where an onset may lie from the begin of the window, which the filters delay.
 */
export interface WindowKind {
  readonly onset: readonly [earliest: number, latest: number];
  readonly hop: number;
  readonly decay: number;
  readonly margin: number;
  readonly skirt: number;
  /** Points in time that the window's band is brought down to, no fewer than the lines of the band. */
  readonly points: number;
}

export const BOTH_HALVES = 0;
export const ONE_HALF = 1;
export const TWO_BANDS = 2;
export const ONE_BAND = 3;
export const ONE_BAND_LONG = 4;
export const WINDOW_KINDS: readonly WindowKind[] = [
  { onset: [-5.5, 0.5], hop: 2, decay: 1.3, margin: 0.06, skirt: 0.4, points: 64 },
  { onset: [-6, 2.5], hop: 4, decay: 2.7, margin: 0.06, skirt: 0.2, points: 64 },
  { onset: [-22, -2], hop: 8, decay: 5.4, margin: 0.0625, skirt: 0.12, points: 64 },
  { onset: [-22, 6], hop: 16, decay: 10.8, margin: 0.0625, skirt: 0.06, points: 64 },
  { onset: [-26, 20], hop: 32, decay: 22, margin: 0.0625, skirt: 0.03, points: 128 },
  // For active regions alone: noise gives too many weak spots of that length.
  { onset: [-30, 40], hop: 0, decay: 45, margin: 0.0625, skirt: 0.02, points: 128 },
];
/** Length of the shortest kind's window in units of 1 / W; each is twice as long as the one before. */
export const SHORTEST_WINDOW = 4;
/** The window ends so many decay times after the latest onset. */
export const TAIL_DECAYS = 2.5;
const TAPER_SHARE = 1 / 16;
/** Between the taper and the earliest onset, in units of 1 / W. */
const GUARD = 1;
/** A kind's times in samples. */
export interface WindowPlan {
  readonly kind: WindowKind;
  readonly size: number;
  readonly taper: number;
  readonly from: number;
  readonly onset: readonly [number, number];
  readonly decay: number;
}

export function planWindow(kind: WindowKind, samplesPerUnit: number): WindowPlan {
  const [earliest, latest] = kind.onset;
  const length = GUARD + latest - earliest + kind.hop + TAIL_DECAYS * kind.decay;
  const wanted = (length * samplesPerUnit) / (1 - 2 * TAPER_SHARE);
  const size = Math.max(MINIMUM_FFT_SIZE, 2 ** Math.round(Math.log2(wanted) + 0.3));
  const taper = TAPER_SHARE * size;
  return {
    kind,
    size,
    taper,
    from: (earliest - GUARD) * samplesPerUnit - taper,
    onset: [earliest * samplesPerUnit, latest * samplesPerUnit],
    decay: kind.decay * samplesPerUnit,
  };
}
