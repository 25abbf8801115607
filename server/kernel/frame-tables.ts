import { hannWindow } from '../signal/hann.ts';
import { bandBins } from '../signal/frame-plan.ts';
import { CEPSTRAL_COEFFICIENTS, cepstralCosines, melBank, melEnergyScale } from '../signal/mel-bank.ts';
import type { ThirdOctave } from '../signal/third-octaves.ts';
import type { Kernel, KernelArray } from './kernel.ts';

const LANES = 4;
const HOP_SUM_FLOATS = 8;
const BLOCK_BINS = 64;
const BLOCK_FLOATS = 3 * LANES;
const MEL_BAND_WORDS = 3;
/** Smallest and largest N of the kernel. */
const MINIMUM_SIZE = 256;
const MAXIMUM_SIZE = 16_384;

type Words = KernelArray<Int32Array>;

/**
 * Writes the fields of `FramePlan` (assembly/frame-plan.ts, in their order) with the tables of a transform of N samples.
 * The fields behind them are zero: no mel bands, no third octaves.
 *
 * @throws RangeError for a size that is no power of two from 256 to 16384.
 */
export function planTransform(kernel: Kernel, size: number): Words {
  if (!Number.isInteger(Math.log2(size)) || size < MINIMUM_SIZE || size > MAXIMUM_SIZE) {
    throw new RangeError(`size: ${size} is not a power of two from ${MINIMUM_SIZE} to ${MAXIMUM_SIZE}`);
  }
  const window = hannWindow(size);
  const blocks = size / 2 / BLOCK_BINS + 1;
  return wordsOf(kernel, [
    size,
    floatsOf(
      kernel,
      Float64Array.from(window.weights, (weight) => weight / window.sum),
    ),
    floatsOf(kernel, twiddles(size / 2)),
    floatsOf(kernel, turns(size / 2)),
    kernel.array(Float32Array, size * LANES).address,
    kernel.array(Float32Array, size * LANES).address,
    kernel.array(Float32Array, (size / 2 + LANES) * LANES).address,
    // Sums of five hops, then the means of four frames in two parts.
    kernel.array(Float32Array, 5 * HOP_SUM_FLOATS + 2 * LANES).address,
    kernel.array(Float32Array, blocks * BLOCK_FLOATS).address,
    ...new Array<number>(PLAN_WORDS - TRANSFORM_WORDS).fill(0),
  ]);
}

const TRANSFORM_WORDS = 9;
const PLAN_WORDS = 19;

interface FeaturePlan {
  size: number;
  sampleRateHz: number;
  bands: readonly ThirdOctave[];
  featureStride: number;
}

/** The same with what the features of one sample rate need. */
export function planFeatures(
  kernel: Kernel,
  { size, sampleRateHz, bands, featureStride }: FeaturePlan,
): Words {
  const plan = planTransform(kernel, size);
  const binHz = sampleRateHz / size;
  const mel = melBank(size, sampleRateHz);
  const scale = melEnergyScale(size);
  const melWords = mel.flatMap(({ first, weights }) => {
    const count = weights.length + (weights.length % 2);
    const scaled = Float64Array.from({ length: count }, (_, i) => (weights[i] ?? 0) * scale);
    return [first, count, floatsOf(kernel, scaled)];
  });
  const fields = [
    bandBins('ultrasonic', size, sampleRateHz).first,
    bitsOf(binHz),
    melWords.length / MEL_BAND_WORDS,
    wordsOf(kernel, melWords).address,
    kernel.array(Float32Array, mel.length * LANES).address,
    CEPSTRAL_COEFFICIENTS,
    floatsOf(kernel, cepstralCosines()),
    bands.length,
    wordsOf(
      kernel,
      bands.flatMap((band) => octaveWords(band, binHz)),
    ).address,
    featureStride,
  ];
  plan.values.set(fields, TRANSFORM_WORDS);
  return plan;
}

/** Whole lines `[first, end)`, then the shares of the lines before and behind them; line k covers k - 1/2 to k + 1/2. */
function octaveWords({ lowHz, highHz }: ThirdOctave, binHz: number): number[] {
  const low = lowHz / binHz;
  const high = highHz / binHz;
  const lowLine = Math.floor(low + 0.5);
  const highLine = Math.floor(high + 0.5);
  if (lowLine === highLine) return [lowLine + 1, lowLine + 1, bitsOf(high - low), 0];
  return [lowLine + 1, highLine, bitsOf(lowLine + 0.5 - low), bitsOf(high - highLine + 0.5)];
}

/** For every radix-4 stage and butterfly exp(-2 pi i p / length) to the powers 1, 2, 3, real and imaginary parts. */
function twiddles(points: number): Float64Array {
  const values: number[] = [];
  for (let length = points; length > 4; length /= 4) {
    for (let p = 0; p < length / 4; p++) {
      for (let power = 1; power <= 3; power++) {
        const angle = (-2 * Math.PI * p * power) / length;
        values.push(Math.cos(angle), Math.sin(angle));
      }
    }
  }
  return Float64Array.from(values);
}

function turns(points: number): Float64Array {
  return Float64Array.from({ length: points + 2 }, (_, i) => {
    const angle = (Math.PI * (i >> 1)) / points;
    return i % 2 === 0 ? Math.cos(angle) : Math.sin(angle);
  });
}

function floatsOf(kernel: Kernel, values: Float64Array): number {
  const array = kernel.array(Float32Array, values.length);
  array.values.set(values);
  return array.address;
}

function wordsOf(kernel: Kernel, values: number[]): Words {
  const array = kernel.array(Int32Array, values.length);
  array.values.set(values);
  return array;
}

function bitsOf(value: number): number {
  return new Int32Array(Float32Array.of(value).buffer)[0]!;
}
