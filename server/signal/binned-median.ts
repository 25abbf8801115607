/** Counts and sums of the cells, to be added to those of other segments. */
export interface BinnedMedianPart {
  counts: Uint32Array;
  sums: Float64Array;
}

/**
 * Median of any number of values in constant memory: the mean of the values in the cell that holds the middle one.
 *
 * The error is under one cell; for equal values there is none. NaN is not counted.
 */
export class BinnedMedian {
  readonly #low: number;
  readonly #cellsPerUnit: number;
  readonly #counts: Uint32Array;
  readonly #sums: Float64Array;

  /** @param cells number of equal cells from low to high; values outside go to the first or the last. */
  constructor(low: number, high: number, cells = 2048) {
    if (!(high > low)) throw new RangeError(`high: ${high} is not above ${low}`);
    this.#low = low;
    this.#cellsPerUnit = cells / (high - low);
    this.#counts = new Uint32Array(cells);
    this.#sums = new Float64Array(cells);
  }

  push(value: number): void {
    if (Number.isNaN(value)) return;
    const last = this.#counts.length - 1;
    const cell = Math.min(last, Math.max(0, Math.floor((value - this.#low) * this.#cellsPerUnit)));
    this.#counts[cell]!++;
    this.#sums[cell]! += value;
  }

  get part(): BinnedMedianPart {
    return { counts: this.#counts, sums: this.#sums };
  }

  /** Takes in the values that another one of the same cells was given. */
  absorb({ counts, sums }: BinnedMedianPart): void {
    counts.forEach((count, cell) => (this.#counts[cell]! += count));
    sums.forEach((sum, cell) => (this.#sums[cell]! += sum));
  }

  /** `null` without values. */
  median(): number | null {
    const total = this.#counts.reduce((sum, count) => sum + count, 0);
    let seen = 0;
    for (let cell = 0; cell < this.#counts.length; cell++) {
      const count = this.#counts[cell]!;
      seen += count;
      if (count > 0 && 2 * seen >= total) return this.#sums[cell]! / count;
    }
    return null;
  }
}
