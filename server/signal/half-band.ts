/*
 * A half-band elliptic filter as the sum and difference of two all-pass chains in z^-2: stop band about -69 dB from 0.3
 * of the rate, -3.01 dB at a quarter of it, the powers of both halves adding up to twice the input's at every frequency.
 *
 * low = A(newer) + B(older), high = A(newer) - B(older) for each pair of samples, with all-pass sections
 * (a + z^-1) / (1 + a z^-1) at the halved rate. The upper half comes out with its spectrum reversed. White noise of
 * variance s becomes white noise of variance 2 s in both halves.
 *
 * Source: R. A. Valenzuela and A. G. Constantinides, Digital signal processing schemes for efficient interpolation and
 * decimation, IEE Proc. G 130 (1983) 225; coefficients of a two-path design of order 9, checked by its response.
 */
export const EVEN_1 = 0.07986642623635751;
export const EVEN_2 = 0.5453536510711322;
export const ODD_1 = 0.28382934487410993;
export const ODD_2 = 0.8344118914807379;
/** Numbers of one splitter's state: of input, first and second section, of the odd and the even chain each. */
export const SPLITTER_STATES = 6;

/**
 * Group delay of the lower half in input samples: the output's sample n belongs to the input's 2 n + 1 less this.
 *
 * @param turnsPerSample frequency over the input's rate, 0 to 0.25.
 */
export function lowHalfDelaySamples(turnsPerSample: number): number {
  const step = 1e-4;
  const at = Math.max(step, turnsPerSample);
  let turn = lowHalfPhase(at - step) - lowHalfPhase(at + step);
  turn -= 2 * Math.PI * Math.round(turn / (2 * Math.PI));
  return turn / (4 * Math.PI * step);
}

function lowHalfPhase(turnsPerSample: number): number {
  const w = 2 * Math.PI * turnsPerSample;
  const even = allPassPhase(EVEN_1, 2 * w) + allPassPhase(EVEN_2, 2 * w);
  const odd = allPassPhase(ODD_1, 2 * w) + allPassPhase(ODD_2, 2 * w) - w;
  return Math.atan2(Math.sin(even) + Math.sin(odd), Math.cos(even) + Math.cos(odd));
}

function allPassPhase(a: number, w: number): number {
  return Math.atan2(-Math.sin(w), a + Math.cos(w)) - Math.atan2(-a * Math.sin(w), 1 + a * Math.cos(w));
}
