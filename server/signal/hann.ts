/** A window with the sums that turn a transform into levels and densities. */
export interface Window {
  readonly weights: Float32Array;
  /** Sum of the weights: a sine of amplitude A in the middle of a bin gives |X| = A sum / 2. */
  readonly sum: number;
  /** Sum of the squared weights: divides a power spectrum into a density. */
  readonly squareSum: number;
}

const windows = new Map<number, Window>();

/**
 * Periodic Hann window, w[n] = 0.5 - 0.5 cos(2 pi n / N).
 *
 * @param size N, samples, at least 2.
 * @returns the weights with their sums: coherent gain 0.5, mean square 0.375, noise bandwidth 1.5 bins.
 * @throws RangeError when size is not a whole number of at least 2.
 * Source: F. J. Harris, On the use of windows for harmonic analysis with the discrete Fourier transform,
 * Proc. IEEE 66 (1978) 51, equation 27 and Table I.
 */
export function hannWindow(size: number): Window {
  if (!Number.isInteger(size) || size < 2) throw new RangeError(`size: ${size} is not a whole number from 2`);
  const known = windows.get(size);
  if (known) return known;
  const weights = new Float32Array(size);
  for (let n = 0; n < size; n++) weights[n] = 0.5 - 0.5 * Math.cos((2 * Math.PI * n) / size);
  // Exact for the periodic form, where the float32 weights would leave their rounding in every level.
  const made: Window = { weights, sum: size / 2, squareSum: size === 2 ? 1 : (3 * size) / 8 };
  windows.set(size, made);
  return made;
}
