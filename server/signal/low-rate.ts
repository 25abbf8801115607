import type { BlockSummer } from './frame-engine.ts';
import { sumOf } from './frame-spectrum.ts';

/** Rate that a reduced signal has at least, where the recording's own is not lower. */
const LOW_RATE_HZ = 8000;
/** Above twice this, blocks are averaged down to about it first, which an engine does at next to no cost. */
const MEAN_RATE_HZ = 32_000;
const MEANS_PER_SAMPLE = MEAN_RATE_HZ / LOW_RATE_HZ;

/** Input samples that are averaged before anything else; 1 at low rates. */
export function samplesPerLowMean(sampleRateHz: number): number {
  return sampleRateHz < 2 * MEAN_RATE_HZ ? 1 : Math.floor(sampleRateHz / MEAN_RATE_HZ);
}

/** Means for one sample of the reduced signal. */
function meansPerSample(sampleRateHz: number): number {
  if (samplesPerLowMean(sampleRateHz) > 1) return MEANS_PER_SAMPLE;
  return Math.max(1, Math.floor(sampleRateHz / LOW_RATE_HZ));
}

/** Input samples for one of the reduced signal, whose rate is from 8 kHz up to twice that. */
export function lowRateFactor(sampleRateHz: number): number {
  return samplesPerLowMean(sampleRateHz) * meansPerSample(sampleRateHz);
}

/**
 * Power response of the reduction at f, for input at fs: D(b, f / fs)^2 D(q, f b / fs)^4 with
 * D(n, x) = sin(pi n x) / (n sin(pi x)). Divide a reduced spectrum by it to have the input's.
 */
export function lowRateResponse(frequencyHz: number, sampleRateHz: number): number {
  const means = samplesPerLowMean(sampleRateHz);
  const place = frequencyHz / sampleRateHz;
  return kernelOf(means, place) ** 2 * kernelOf(meansPerSample(sampleRateHz), place * means) ** 4;
}

function kernelOf(count: number, place: number): number {
  const sine = Math.sin(Math.PI * place);
  return count === 1 || sine === 0 ? 1 : Math.sin(Math.PI * place * count) / (count * sine);
}

/**
 * Reduces a signal to about 8 kHz: means of b samples, and of those means over triangles two blocks of q wide (a second-order
 * comb).
 *
 * y[j] = sum_n w[n] m[jq + n] / q^2, w rising 1..q over block j and falling q-1..0 over the next. The spectrum is zero at the
 * multiples of fs / (b q), and what folds onto f is (f / (r - f))^2 down for the reduced rate r: 35 dB at 1 kHz, 15 dB at
 * 2.6 kHz; f / r at multiples of 32 kHz. Enough for a screen and for bands up to 1 kHz, not for listening.
 *
 * Cost: 0.5 to 2 ns per input sample.
 * Source: E. B. Hogenauer, An economical class of digital filters for decimation and interpolation, IEEE ASSP-29 (1981) 155.
 */
export class LowRateSignal {
  readonly rateHz: number;
  readonly #means: Means | null;
  readonly #factor: number;
  #reduced = new Float32Array(0);
  #place = 0;
  #sum = 0;
  #moment = 0;
  /** The rising half of the triangle over the block before; none before the first. */
  #rising: number | null = null;

  /** @param sumBlocks sums of `samplesPerLowMean` samples each; not asked where that is 1. */
  constructor(sampleRateHz: number, sumBlocks: BlockSummer) {
    const length = samplesPerLowMean(sampleRateHz);
    this.rateHz = sampleRateHz / lowRateFactor(sampleRateHz);
    this.#means = length > 1 ? new Means(length, sumBlocks) : null;
    this.#factor = meansPerSample(sampleRateHz);
  }

  /** @returns the samples that are complete with these, reused; the first of all covers the first two blocks. */
  push(samples: Float32Array, from: number, to: number): Float32Array {
    if (!this.#means) return this.#reduce(samples, from, to);
    const means = this.#means.push(samples, from, to);
    return this.#reduce(means, 0, means.length);
  }

  #reduce(samples: Float32Array, from: number, to: number): Float32Array {
    const factor = this.#factor;
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
    const factor = this.#factor;
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
    const factor = this.#factor;
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

/** Means of blocks of equal length, kept going from one call to the next. */
class Means {
  readonly #length: number;
  readonly #sumBlocks: BlockSummer;
  #means = new Float32Array(0);
  #sum = 0;
  #count = 0;

  constructor(length: number, sumBlocks: BlockSummer) {
    this.#length = length;
    this.#sumBlocks = sumBlocks;
  }

  push(samples: Float32Array, from: number, to: number): Float32Array {
    const length = this.#length;
    const most = Math.ceil((to - from) / length) + 1;
    if (this.#means.length < most) this.#means = new Float32Array(most);
    const start = this.#count === 0 ? from : Math.min(to, from + length - this.#count);
    let count = this.#add(samples, from, start);
    const blocks = Math.floor((to - start) / length);
    const sums = this.#sumBlocks(samples, start, blocks);
    for (let block = 0; block < blocks; block++) this.#means[count++] = sums[block]! / length;
    this.#add(samples, start + blocks * length, to);
    return this.#means.subarray(0, count);
  }

  /** Adds to the mean that is open. @returns how many means that completes, which is then the first. */
  #add(samples: Float32Array, from: number, to: number): number {
    this.#sum += sumOf(samples, from, to);
    this.#count += to - from;
    if (this.#count < this.#length) return 0;
    this.#means[0] = this.#sum / this.#length;
    this.#sum = 0;
    this.#count = 0;
    return 1;
  }
}
