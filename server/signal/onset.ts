/** Where a burst begins, by the two-model criterion, and how well that is known. */
export interface OnsetPick {
  /** First sample of the later part: 0 is the window's first sample. */
  readonly index: number;
  /** Standard deviation of the place in samples, by the weights of the criterion. */
  readonly uncertaintySamples: number;
  /** rms after over rms before, in dB. */
  readonly stepDb: number;
}

export interface OnsetOptions {
  /** A window whose step is smaller holds no onset: the criterion has a minimum even in plain noise. */
  readonly minimumStepDb: number;
  /** Share of the samples that are independent: 1 for white noise, 2 B / fs behind a band filter of width B. */
  readonly independentShare?: number;
}

const MINIMUM_PART = 2;
const SMALLEST_VARIANCE = 1e-30;
const ROUNDING_UNCERTAINTY = 1 / Math.sqrt(12);

/**
 * Akaike's criterion of a window that is cut in two at every place:
 * AIC(k) = k ln var(x[0..k)) + (N - k - 1) ln var(x[k..N)), variances over the population.
 *
 * @param samples N samples, one onset among them; any unit.
 * @returns N values; Infinity where a part would have fewer than 2 samples. Variances are held above 1e-30, so
 * digital silence gives no infinity. NaN in the samples gives NaN. Cost: two passes.
 * Source: N. Maeda, A method for reading and checking phase times in autoprocessing system of seismic wave data,
 * Zisin 38 (1985) 365.
 */
export function onsetCriterion(samples: Float32Array | Float64Array): Float64Array {
  const count = samples.length;
  const curve = new Float64Array(count).fill(Infinity);
  let total = 0;
  let totalSquares = 0;
  for (let n = 0; n < count; n++) {
    const value = samples[n] ?? 0;
    total += value;
    totalSquares += value * value;
  }
  let sum = 0;
  let squares = 0;
  for (let k = 1; k < count; k++) {
    const value = samples[k - 1] ?? 0;
    sum += value;
    squares += value * value;
    if (k < MINIMUM_PART || count - k < MINIMUM_PART) continue;
    const before = variance(sum, squares, k);
    const after = variance(total - sum, totalSquares - squares, count - k);
    curve[k] = k * Math.log(before) + (count - k - 1) * Math.log(after);
  }
  return curve;
}

/**
 * The onset in a window, or `null` where the step from before to after is under the gate.
 *
 * The uncertainty is the spread of the weights exp(-(AIC(k) - AIC minimum) / 2), each exponent reduced to the
 * number of independent samples, and never under the rounding to one sample (1 / sqrt 12).
 *
 * Source: Maeda 1985 (place); K. P. Burnham and D. R. Anderson, Model Selection and Multimodel Inference, 2.9 (weights).
 */
export function pickOnset(samples: Float32Array | Float64Array, options: OnsetOptions): OnsetPick | null {
  const curve = onsetCriterion(samples);
  let index = -1;
  let least = Infinity;
  for (let k = 0; k < curve.length; k++) {
    const value = curve[k] ?? Infinity;
    if (value < least) {
      least = value;
      index = k;
    }
  }
  if (index < 0) return null;
  const stepDb = 10 * Math.log10(meanSquare(samples, index, samples.length) / meanSquare(samples, 0, index));
  if (!(stepDb >= options.minimumStepDb)) return null;
  return { index, uncertaintySamples: spreadOf(curve, index, options.independentShare ?? 1), stepDb };
}

function spreadOf(curve: Float64Array, index: number, independentShare: number): number {
  const least = curve[index] ?? 0;
  let weightSum = 0;
  let squareSum = 0;
  for (let k = 0; k < curve.length; k++) {
    const weight = Math.exp((-independentShare * ((curve[k] ?? Infinity) - least)) / 2);
    weightSum += weight;
    squareSum += weight * (k - index) ** 2;
  }
  return Math.max(ROUNDING_UNCERTAINTY, Math.sqrt(squareSum / weightSum));
}

function meanSquare(samples: Float32Array | Float64Array, from: number, to: number): number {
  let squares = 0;
  for (let n = from; n < to; n++) squares += (samples[n] ?? 0) ** 2;
  return Math.max(SMALLEST_VARIANCE, squares / Math.max(1, to - from));
}

function variance(sum: number, squares: number, count: number): number {
  const mean = sum / count;
  return Math.max(SMALLEST_VARIANCE, squares / count - mean * mean);
}
