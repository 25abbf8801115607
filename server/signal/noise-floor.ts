/** 1 / (inverse normal distribution at 0.75): turns a median absolute deviation into a standard deviation. */
export const MAD_TO_SIGMA = 1.482602218505602;

/** The normal distribution's lower quartile. */
const LOWER_QUARTILE = -0.674489750196082;

/**
 * Median of a set, the mean of the middle two for an even number; NaN for none.
 * Cost: a few passes over a copy.
 */
export function median(values: Float32Array | Float64Array): number {
  const count = values.length;
  if (count === 0) return Number.NaN;
  const copy = new Float64Array(values);
  const middle = count >> 1;
  const upper = select(copy, count, middle);
  if (count % 2 === 1) return upper;
  let lower = copy[0]!;
  for (let k = 1; k < middle; k++) lower = Math.max(lower, copy[k]!);
  return (lower + upper) / 2;
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
  const deviations = new Float64Array(values.length);
  for (let k = 0; k < values.length; k++) deviations[k] = Math.abs(values[k]! - centre);
  return MAD_TO_SIGMA * median(deviations);
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
  readonly #scratch: Float64Array;
  readonly #valuesPerBlock: number;
  #held = 0;
  #next = 0;

  /**
   * @param blocks number of block means held, at least 1.
   * @param valuesPerBlock squared values behind one mean.
   */
  constructor(blocks: number, valuesPerBlock: number) {
    this.#means = new Float64Array(blocks);
    this.#scratch = new Float64Array(blocks);
    this.#valuesPerBlock = valuesPerBlock;
  }

  get blocks(): number {
    return this.#held;
  }

  push(blockMean: number): void {
    this.#means[this.#next] = blockMean;
    this.#next = (this.#next + 1) % this.#means.length;
    this.#held = Math.min(this.#held + 1, this.#means.length);
  }

  /** Makes every block mean that of a noise power, as if it had been so for ever. */
  fill(level: number): void {
    this.#means.fill(level * quantileOfMean(0.5, this.#valuesPerBlock));
    this.#held = this.#means.length;
  }

  /** The mean noise power by a lower quantile of the block means, 0 before the first block. Cost: a few passes. */
  quantile(share: 0.25 | 0.5): number {
    return this.#select(share) / quantileOfMean(share, this.#valuesPerBlock);
  }

  /** The mean noise power by the median of the block means, 0 before the first block. Cost: a few passes. */
  read(): { level: number } {
    return { level: this.quantile(0.5) };
  }

  /** The block mean at 84 %: one standard deviation over the middle for normal values. Cost: a few passes. */
  upper(): number {
    return this.#select(0.84);
  }

  /** Mean of the last block means, of at most as many as there are; 0 before the first. */
  recentMean(count: number): number {
    const blocks = Math.min(count, this.#held);
    const size = this.#means.length;
    let sum = 0;
    for (let k = 1; k <= blocks; k++) sum += this.#means[(this.#next - k + size) % size]!;
    return blocks > 0 ? sum / blocks : 0;
  }

  #select(share: number): number {
    const held = this.#held;
    if (held === 0) return 0;
    for (let k = 0; k < held; k++) this.#scratch[k] = this.#means[k]!;
    return select(this.#scratch, held, Math.floor(share * (held - 1) + 0.5));
  }
}

/** The value that would stand at `rank` if the first `count` were sorted; changes their order (Hoare 1961, CACM 4:321). */
function select(values: Float64Array, count: number, rank: number): number {
  let low = 0;
  let high = count - 1;
  while (low < high) {
    const pivot = values[rank]!;
    let left = low;
    let right = high;
    while (left <= right) {
      while (values[left]! < pivot) left += 1;
      while (pivot < values[right]!) right -= 1;
      if (left > right) break;
      const kept = values[left]!;
      values[left] = values[right]!;
      values[right] = kept;
      left += 1;
      right -= 1;
    }
    if (right < rank) low = left;
    if (rank < left) high = right;
  }
  return values[rank]!;
}

/** Quantile of the mean of n squared normal values of variance 1 (Wilson and Hilferty), for shares of a quarter and a half. */
function quantileOfMean(share: 0.25 | 0.5, values: number): number {
  const spread = 2 / (9 * values);
  const normal = share === 0.5 ? 0 : LOWER_QUARTILE;
  return (1 - spread + normal * Math.sqrt(spread)) ** 3;
}
