/**
 * The rate of bursts about a place, cautiously: what stands out less may count where bursts are frequent.
 *
 * Of n bursts in the last seconds m may be noise; the rate is taken as (n - m - sqrt n) / time, one standard deviation under what was
 * counted. A weak one is believed where noise gives such at a rate of at most a small share of that; so this share bounds how many of all may be
 * false.
 *
 * Source: Y. Benjamini and Y. Hochberg, Controlling the false discovery rate, J. R. Stat. Soc. B 57 (1995) 289 (principle).
 */
export class SureRate {
  readonly #memorySamples: number;
  readonly #sampleRateHz: number;
  readonly #byNoise: number;
  #onsets: number[] = [];

  /** @param noiseRateHz rate at which noise alone gives what is added. */
  constructor(memoryS: number, noiseRateHz: number, sampleRateHz: number) {
    this.#memorySamples = memoryS * sampleRateHz;
    this.#byNoise = memoryS * noiseRateHz;
    this.#sampleRateHz = sampleRateHz;
  }

  /** @param onset in rising order. */
  add(onset: number): void {
    this.#onsets.push(onset);
  }

  /** Least rate per second in the time before a place; asked in rising order. */
  before(sample: number): number {
    let gone = 0;
    while ((this.#onsets[gone] ?? Infinity) < sample - this.#memorySamples) gone += 1;
    if (gone > 0) this.#onsets.splice(0, gone);
    let count = 0;
    while ((this.#onsets[count] ?? Infinity) < sample) count += 1;
    const least = count - this.#byNoise - Math.sqrt(count);
    return Math.max(0, (least * this.#sampleRateHz) / this.#memorySamples);
  }
}
