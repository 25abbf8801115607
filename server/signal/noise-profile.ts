import { realFft } from './fft.ts';
import { hannWindow } from './hann.ts';
import { median } from './noise-floor.ts';

/** What a noise looks like: power of each line of a transform of `size` samples under a Hann window, smoothed over its neighbours. */
export interface NoiseProfile {
  size: number;
  /** size / 2 + 1 lines; full scale 1, not normalised. */
  power: Float64Array;
}

const LEAST_SIZE = 256;
const MOST_SIZE = 16_384;
/** As the long frames of a measurement. */
const FRAME_S = 0.0107;
/** Median of an exponential distribution over its mean: that of the power of a line of Gaussian noise. */
const MEDIAN_TO_MEAN = 1 / Math.LN2;
/** Weights of a line and its neighbours. */
const SMOOTHING = [1, 2, 3, 2, 1] as const;

/**
 * The frame of a spectral gate: the power of two nearest to 10.7 ms of what is heard.
 *
 * Slowed, frames are shorter in the recording: they part fewer tones there, and the noise that opens with a click lasts no longer in the
 * ear.
 *
 * @param sampleRateHz above 0
 * @param slow how many times slower it is heard, at least 1
 * @returns 256 to 16,384 samples
 */
export function gateFrameSize(sampleRateHz: number, slow: number): number {
  const nearest = 2 ** Math.round(Math.log2((sampleRateHz / slow) * FRAME_S));
  return Math.min(MOST_SIZE, Math.max(LEAST_SIZE, nearest));
}

/**
 * Collects the frames of a quiet span and tells what its noise looks like.
 *
 * P[k] = median over the frames of |X[k]|^2 / ln 2, which is the mean for Gaussian noise and is not moved by a click or two; then smoothed
 * over five lines with the weights 1, 2, 3, 2, 1.
 *
 * @param size N, samples of a frame, a power of two, 32 to 1,048,576
 * Cost: one transform for each frame, and sorting; 8 bytes for each line of each frame are kept.
 * Source: the noise estimate of S. F. Boll, "Suppression of acoustic noise in speech using spectral subtraction", IEEE Trans. ASSP 27
 *   (1979) 113, with a median for its mean.
 */
export class NoiseProfiler {
  readonly size: number;
  readonly #frames: Float64Array[] = [];

  constructor(size: number) {
    this.size = size;
  }

  /** @param frame `size` samples, full scale 1, finite @throws RangeError for another length */
  push(frame: Float32Array): void {
    if (frame.length !== this.size)
      throw new RangeError(`frame: ${frame.length} is not ${this.size} samples`);
    this.#frames.push(framePower(frame));
  }

  /** @returns silence (all 0) where no frame was pushed */
  finish(): NoiseProfile {
    const lines = this.size / 2 + 1;
    const column = new Float64Array(this.#frames.length);
    const power = Float64Array.from({ length: lines }, (_, k) => {
      for (const [t, frame] of this.#frames.entries()) column[t] = frame[k]!;
      return column.length === 0 ? 0 : median(column) * MEDIAN_TO_MEAN;
    });
    return { size: this.size, power: smoothLines(power) };
  }
}

/** |X[k]|^2 of a frame under a periodic Hann window, k from 0 to N / 2. */
export function framePower(frame: Float32Array): Float64Array {
  const fft = realFft(frame.length);
  const { weights } = hannWindow(frame.length);
  const { input } = fft;
  for (let n = 0; n < frame.length; n++) input[n] = frame[n]! * weights[n]!;
  fft.transform();
  return linePower(fft.output);
}

/** @param spectrum as `RealFft` gives it */
export function linePower(spectrum: Float32Array): Float64Array {
  const half = spectrum.length / 2;
  const power = new Float64Array(half + 1);
  power[0] = spectrum[0]! ** 2;
  power[half] = spectrum[1]! ** 2;
  for (let k = 1; k < half; k++) power[k] = spectrum[2 * k]! ** 2 + spectrum[2 * k + 1]! ** 2;
  return power;
}

/** Weighted mean of each line and two neighbours on either side; at the ends of those that are there. */
export function smoothLines(power: Float64Array): Float64Array {
  const smooth = new Float64Array(power.length);
  for (let k = 2; k < power.length - 2; k++) {
    const near = power[k - 1]! + power[k + 1]!;
    smooth[k] = (power[k - 2]! + 2 * near + 3 * power[k]! + power[k + 2]!) / 9;
  }
  for (const k of [0, 1, power.length - 2, power.length - 1]) smooth[k] = smoothAtEnd(power, k);
  return smooth;
}

function smoothAtEnd(power: Float64Array, k: number): number {
  let sum = 0;
  let weights = 0;
  for (const [j, weight] of SMOOTHING.entries()) {
    const value = power[k + j - 2];
    if (value === undefined) continue;
    sum += value * weight;
    weights += weight;
  }
  return sum / weights;
}
