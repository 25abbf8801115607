/** Lengths of the two averages in samples. */
export interface StaLtaWindows {
  readonly shortSamples: number;
  readonly longSamples: number;
}

/**
 * Short-term over long-term mean of a non-negative characteristic function, both ending at the same sample:
 * r[i] = (sum of the last ns) / ns / ((sum of the last nl) / nl).
 *
 * @param energy squared signal or other characteristic function, 0 or above.
 * @returns one ratio per sample; 0 before the long window is full and where the long mean is 0.
 * @throws RangeError unless 1 <= shortSamples < longSamples. NaN spreads to all later values. Cost: one pass.
 * Source: R. V. Allen, Automatic earthquake recognition and timing from single traces, BSSA 68 (1978) 1521.
 */
export function classicStaLta(energy: Float32Array | Float64Array, windows: StaLtaWindows): Float64Array {
  requireWindows(windows);
  const { shortSamples, longSamples } = windows;
  const ratios = new Float64Array(energy.length);
  let shortSum = 0;
  let longSum = 0;
  for (let i = 0; i < energy.length; i++) {
    const value = energy[i] ?? 0;
    shortSum += value - (i >= shortSamples ? (energy[i - shortSamples] ?? 0) : 0);
    longSum += value - (i >= longSamples ? (energy[i - longSamples] ?? 0) : 0);
    if (i >= longSamples - 1 && longSum > 0) ratios[i] = shortSum / shortSamples / (longSum / longSamples);
  }
  return ratios;
}

/**
 * The recursive form: STA[i] = e[i] / ns + (1 - 1 / ns) STA[i-1], LTA alike with nl, r = STA / LTA.
 *
 * @param energy squared signal or other characteristic function, 0 or above.
 * @param initial state of both averages, the mean before the first sample.
 * @returns one ratio per sample; 0 where the long average is 0.
 * @throws RangeError unless 1 <= shortSamples < longSamples. NaN spreads to all later values. Cost: one pass.
 * Source: M. Withers et al., A comparison of select trigger algorithms for automated global seismic phase and
 * event detection, BSSA 88 (1998) 95, p. 98.
 */
export function recursiveStaLta(
  energy: Float32Array | Float64Array,
  windows: StaLtaWindows,
  initial = 0,
): Float64Array {
  requireWindows(windows);
  const ratios = new Float64Array(energy.length);
  let short = initial;
  let long = initial;
  for (let i = 0; i < energy.length; i++) {
    const value = energy[i] ?? 0;
    short += (value - short) / windows.shortSamples;
    long += (value - long) / windows.longSamples;
    ratios[i] = long > 0 ? short / long : 0;
  }
  return ratios;
}

export function requireWindows({ shortSamples, longSamples }: StaLtaWindows): void {
  if (
    Number.isInteger(shortSamples) &&
    Number.isInteger(longSamples) &&
    shortSamples >= 1 &&
    longSamples > shortSamples
  ) {
    return;
  }
  throw new RangeError(
    `windows ${shortSamples} and ${longSamples}: whole numbers, the long one longer, are needed`,
  );
}
