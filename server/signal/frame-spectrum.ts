import { realFft, type RealFft } from './fft.ts';
import { hannWindow, type Window } from './hann.ts';

/** Mean square (mean removed) under which a frame counts as silence: -180 dB, far below the last bit of any recorder. */
export const SILENCE_MEAN_SQUARE = 1e-18;

/**
 * Power spectra of frames: mean removed, periodic Hann, power[k] = |2 X[k] / sum(w)|^2.
 *
 * A sine of amplitude A in the middle of bin k gives power[k] = A^2, so that 10 log10(power) is its level in dB re
 * full scale by AES17 (a full-scale sine has 0 dB). Bins 0 to N/2 - 1; the Nyquist bin is left out, as meyda does.
 *
 * Cost: 8 microseconds for N = 2048. float32: lines more than 130 dB under the strongest of a frame are rounding noise.
 */
export class FrameSpectrum {
  readonly size: number;
  readonly power: Float32Array;
  /** The same memory as `power`. */
  readonly powerBits: Int32Array;
  /** Mean of the frame, mean square after removing it, and largest magnitude before; over the samples that exist. */
  mean = 0;
  meanSquare = 0;
  peak = 0;
  /** Changes of sign of the samples (mean removed) from one to the next. */
  crossings = 0;
  readonly #fft: RealFft;
  readonly #window: Window;
  readonly #scale: number;

  /** @param size N, a power of two from 32. */
  constructor(size: number) {
    this.size = size;
    this.power = new Float32Array(size / 2);
    this.powerBits = new Int32Array(this.power.buffer);
    this.#fft = realFft(size);
    this.#window = hannWindow(size);
    this.#scale = 4 / (this.#window.sum * this.#window.sum);
  }

  get isSilent(): boolean {
    return this.meanSquare < SILENCE_MEAN_SQUARE;
  }

  /**
   * Renews every field.
   *
   * @param samples full scale 1, finite.
   * @param from first sample of the frame.
   * @param to exclusive; at most N samples, missing ones count as zero after removal of the mean.
   */
  analyse(samples: Float32Array, from: number, to: number): void {
    this.#measure(samples, from, to);
    this.#transform(0, this.power.length);
  }

  /** Renews `mean` and the bins `[firstBin, endBin)` of `power` alone. */
  analyseBins(samples: Float32Array, from: number, to: number, bins: { first: number; end: number }): void {
    const { weights } = this.#window;
    const input = this.#fft.input;
    const count = to - from;
    const mean = sumOf(samples, from, to) / count;
    for (let n = 0; n < count; n++) input[n] = (samples[from + n]! - mean) * weights[n]!;
    if (count < this.size) input.fill(0, count);
    this.mean = mean;
    this.#transform(bins.first, bins.end);
  }

  #transform(firstBin: number, endBin: number): void {
    this.#fft.transform();
    const { power } = this;
    const spectrum = this.#fft.output;
    const scale = this.#scale;
    for (let k = Math.max(firstBin, 1); k < endBin; k++) {
      const re = spectrum[2 * k]!;
      const im = spectrum[2 * k + 1]!;
      power[k] = (re * re + im * im) * scale;
    }
    if (firstBin === 0) power[0] = spectrum[0]! * spectrum[0]! * scale;
  }

  #measure(samples: Float32Array, from: number, to: number): void {
    const count = to - from;
    const { weights } = this.#window;
    const input = this.#fft.input;
    const mean = sumOf(samples, from, to) / count;
    let evenSquares = 0;
    let oddSquares = 0;
    let peak = 0;
    for (let n = 0; n + 1 < count; n += 2) {
      const first = samples[from + n]!;
      const second = samples[from + n + 1]!;
      const a = first - mean;
      const b = second - mean;
      input[n] = a * weights[n]!;
      input[n + 1] = b * weights[n + 1]!;
      evenSquares += a * a;
      oddSquares += b * b;
      if (Math.abs(first) > peak) peak = Math.abs(first);
      if (Math.abs(second) > peak) peak = Math.abs(second);
    }
    if (count % 2 === 1) {
      const last = samples[to - 1]!;
      input[count - 1] = (last - mean) * weights[count - 1]!;
      evenSquares += (last - mean) ** 2;
      peak = Math.max(peak, Math.abs(last));
    }
    if (count < this.size) input.fill(0, count);
    this.mean = mean;
    this.meanSquare = (evenSquares + oddSquares) / count;
    this.peak = peak;
    this.crossings = this.#countCrossings(count);
  }

  /**
   * By the sign bits of the windowed samples, which are those of the samples (a weight of zero keeps the sign of its
   * zero): a branch per sample would be guessed wrong at every second sample of noise.
   */
  #countCrossings(count: number): number {
    const bits = this.#fft.inputBits;
    let crossings = 0;
    let last = bits[0]!;
    let n = 1;
    for (; n + 1 < count; n += 2) {
      const first = bits[n]!;
      const second = bits[n + 1]!;
      crossings += ((last ^ first) >>> 31) + ((first ^ second) >>> 31);
      last = second;
    }
    return n < count ? crossings + ((last ^ bits[n]!) >>> 31) : crossings;
  }
}

/** Four sums run side by side: one addition would have to wait for the one before. */
export function sumOf(samples: Float32Array, from: number, to: number): number {
  let first = 0;
  let second = 0;
  let third = 0;
  let fourth = 0;
  let i = from;
  for (; i + 3 < to; i += 4) {
    first += samples[i]!;
    second += samples[i + 1]!;
    third += samples[i + 2]!;
    fourth += samples[i + 3]!;
  }
  for (; i < to; i++) first += samples[i]!;
  return first + second + (third + fourth);
}

/**
 * Mean square that the lines of a Hann spectrum carry: sum(power) * sum(w)^2 / (2 N sum(w^2)) = sum(power) / 3.
 *
 * By Parseval's theorem, with power as `FrameSpectrum` scales it: a full-scale sine has power 0.25, 1, 0.25 in three
 * bins and mean square 0.5.
 */
export function meanSquareOfBins(power: Float32Array, first: number, end: number): number {
  return sumOf(power, first, end) / 3;
}
