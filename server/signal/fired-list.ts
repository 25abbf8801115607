/** Sums above their threshold, in arrays that grow and are used again. */
export class FiredList {
  #keys = new Float64Array(64);
  #sums = new Float64Array(64);
  #order = new Float64Array(64);
  length = 0;

  clear(): void {
    this.length = 0;
  }

  /** @param index of the test, below 256. */
  add(cell: number, index: number, sum: number): void {
    if (this.length === this.#keys.length) this.#grow();
    this.#keys[this.length] = cell * TESTS + index;
    this.#sums[this.length] = sum;
    this.length += 1;
  }

  /** By rising cell, then test. */
  sort(): void {
    if (this.length === 0) return;
    const keys = this.#keys;
    this.#order = Float64Array.from({ length: this.length }, (_, k) => k).sort((a, b) => keys[a]! - keys[b]!);
  }

  cell(at: number): number {
    return Math.floor(this.#keys[this.#order[at]!]! / TESTS);
  }

  index(at: number): number {
    return this.#keys[this.#order[at]!]! % TESTS;
  }

  sum(at: number): number {
    return this.#sums[this.#order[at]!]!;
  }

  #grow(): void {
    const grown = (values: Float64Array) => {
      const larger = new Float64Array(2 * values.length);
      larger.set(values);
      return larger;
    };
    this.#keys = grown(this.#keys);
    this.#sums = grown(this.#sums);
  }
}

const TESTS = 256;
