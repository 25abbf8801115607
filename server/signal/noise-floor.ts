/** 1 / (inverse normal distribution at 0.75): turns a median absolute deviation into a standard deviation. */
export const MAD_TO_SIGMA = 1.482602218505602;

/**
 * Median of a set, the mean of the middle two for an even number; NaN for none.
 * Cost: a sort of a copy.
 */
export function median(values: Float32Array | Float64Array): number {
  const sorted = Float64Array.from(values).sort();
  const middle = sorted.length >> 1;
  if (sorted.length === 0) return Number.NaN;
  if (sorted.length % 2 === 1) return sorted[middle] ?? Number.NaN;
  return ((sorted[middle - 1] ?? 0) + (sorted[middle] ?? 0)) / 2;
}

/**
 * Standard deviation of noise under rare bursts: 1.4826 median |x - median x|.
 *
 * Holds for values with a normal distribution, such as samples. The envelope of such noise has Rayleigh's
 * distribution, whose deviation is not this multiple: from an envelope take sigma = median / 1.17741
 * (`sigmaFromEnvelope`).
 *
 * @returns 0 where more than half the values are equal; NaN for none.
 * Source: F. R. Hampel, The influence curve and its role in robust estimation, JASA 69 (1974) 383.
 */
export function robustSigma(values: Float32Array | Float64Array): number {
  const centre = median(values);
  return MAD_TO_SIGMA * median(Float64Array.from(values, (value) => Math.abs(value - centre)));
}

/** Standard deviation of the noise behind an envelope: median / sqrt(2 ln 2), by Rayleigh's distribution. */
export function sigmaFromEnvelope(envelope: Float32Array | Float64Array): number {
  return median(envelope) / Math.sqrt(2 * Math.LN2);
}

/**
 * A running robust level of a noise power: the median of the means of its last blocks, corrected to the mean.
 *
 * Values that belong to a burst are not given to it, so the floor stands still while a burst lasts; a block with few
 * quiet values is dropped whole. The median of the mean of n squared normal values is (1 - 2 / (9 n))^3 of the mean.
 *
 * Source: E. B. Wilson and M. M. Hilferty, The distribution of chi-square, PNAS 17 (1931) 684 (correction).
 */
export class RunningFloor {
  readonly #means: Float64Array;
  readonly #sorted: Float64Array;
  readonly #correction: number;
  #held = 0;
  #next = 0;

  /**
   * @param blocks number of block means held, at least 1.
   * @param valuesPerBlock squared values behind one mean.
   */
  constructor(blocks: number, valuesPerBlock: number) {
    this.#means = new Float64Array(blocks);
    this.#sorted = new Float64Array(blocks);
    this.#correction = (1 - 2 / (9 * valuesPerBlock)) ** 3;
  }

  get blocks(): number {
    return this.#held;
  }

  push(blockMean: number): void {
    this.#means[this.#next] = blockMean;
    this.#next = (this.#next + 1) % this.#means.length;
    this.#held = Math.min(this.#held + 1, this.#means.length);
  }

  /** The mean noise power (0 before the first block), and the block mean at 84 % over the one at 50 %. Cost: a sort. */
  read(): { level: number; upperSpread: number } {
    const sorted = this.#sorted.subarray(0, this.#held);
    sorted.set(this.#means.subarray(0, this.#held));
    sorted.sort();
    const middle = sorted[Math.floor(0.5 * (this.#held - 1) + 0.5)] ?? 0;
    const upper = sorted[Math.floor(0.84 * (this.#held - 1) + 0.5)] ?? 0;
    return { level: middle / this.#correction, upperSpread: middle > 0 ? upper / middle : 1 };
  }
}
