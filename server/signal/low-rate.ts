/** Rate that a reduced signal has at least, where the recording's own is not lower. */
const LOW_RATE_HZ = 8000;

/** Input samples for one of the reduced signal, whose rate is from 8 kHz up to twice that. */
export function lowRateFactor(sampleRateHz: number): number {
  return Math.max(1, Math.floor(sampleRateHz / LOW_RATE_HZ));
}

/**
 * Power response of the reduction by R at f, for input at fs: (sin(pi f R / fs) / (R sin(pi f / fs)))^4.
 * Divide a reduced spectrum by it to have the input's.
 */
export function lowRateResponse(frequencyHz: number, sampleRateHz: number): number {
  const factor = lowRateFactor(sampleRateHz);
  const angle = (Math.PI * frequencyHz) / sampleRateHz;
  if (factor === 1 || angle === 0) return 1;
  return (Math.sin(angle * factor) / (factor * Math.sin(angle))) ** 4;
}

/**
 * Reduces a signal to about 8 kHz by means over triangles two blocks of R samples wide (a second-order comb).
 *
 * y[j] = sum_n w[n] x[jR + n] / R^2, w rising 1..R over block j and falling R-1..0 over the next: its spectrum is zero at the
 * multiples of fs / R, and what folds onto f is (f R / (fs - f R))^2 down: 35 dB at 1 kHz, 15 dB at 2.6 kHz. Enough for a
 * screen and for bands up to 1 kHz, not for listening.
 *
 * Cost: 1 ns per input sample, at any rate.
 * Source: E. B. Hogenauer, An economical class of digital filters for decimation and interpolation, IEEE ASSP-29 (1981) 155.
 */
export class LowRateSignal {
  readonly factor: number;
  readonly rateHz: number;
  #reduced = new Float32Array(0);
  #place = 0;
  #sum = 0;
  #moment = 0;
  /** The rising half of the triangle over the block before; none before the first. */
  #rising: number | null = null;

  constructor(sampleRateHz: number) {
    this.factor = lowRateFactor(sampleRateHz);
    this.rateHz = sampleRateHz / this.factor;
  }

  /** @returns the samples that are complete with these, reused; the first of all covers the first two blocks. */
  push(samples: Float32Array, from: number, to: number): Float32Array {
    const { factor } = this;
    if (factor === 1) return samples.subarray(from, to);
    const most = Math.ceil((to - from) / factor) + 1;
    if (this.#reduced.length < most) this.#reduced = new Float32Array(most);
    const first = Math.min(to, from + ((factor - this.#place) % factor));
    this.#add(samples, from, first);
    let count = this.#place === factor ? this.#closeBlock(0) : 0;
    const blocks = Math.floor((to - first) / factor);
    if (blocks > 0) count = this.#reduceBlocks(samples, first, blocks, count);
    this.#add(samples, first + blocks * factor, to);
    return this.#reduced.subarray(0, count);
  }

  /** Whole blocks, where nothing has to be kept from sample to sample. @returns how many reduced samples there are now. */
  #reduceBlocks(samples: Float32Array, first: number, blocks: number, count: number): number {
    const { factor } = this;
    const scale = 1 / (factor * factor);
    const reduced = this.#reduced;
    let at = first;
    let made = count;
    let rising = this.#rising;
    for (let block = 0; block < blocks; block++) {
      // Two of each run side by side: one addition would have to wait for the one before.
      let sum = 0;
      let moment = 0;
      let nextSum = 0;
      let nextMoment = 0;
      let weight = 1;
      for (; weight < factor; weight += 2, at += 2) {
        const x = samples[at]!;
        const next = samples[at + 1]!;
        sum += x;
        moment += weight * x;
        nextSum += next;
        nextMoment += (weight + 1) * next;
      }
      if (weight === factor) {
        const x = samples[at++]!;
        sum += x;
        moment += factor * x;
      }
      moment += nextMoment;
      if (rising !== null) reduced[made++] = (rising + factor * (sum + nextSum) - moment) * scale;
      rising = moment;
    }
    this.#rising = rising;
    return made;
  }

  #add(samples: Float32Array, from: number, to: number): void {
    for (let i = from; i < to; i++) {
      this.#sum += samples[i]!;
      this.#moment += ++this.#place * samples[i]!;
    }
  }

  #closeBlock(count: number): number {
    const { factor } = this;
    const rising = this.#rising;
    const falling = factor * this.#sum - this.#moment;
    this.#rising = this.#moment;
    this.#place = 0;
    this.#sum = 0;
    this.#moment = 0;
    if (rising === null) return count;
    this.#reduced[count] = (rising + falling) / (factor * factor);
    return count + 1;
  }
}
