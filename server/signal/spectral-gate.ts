import { realFft, type RealFft } from './fft.ts';
import { hannWindow } from './hann.ts';
import { linePower, smoothLines, type NoiseProfile } from './noise-profile.ts';

/** What is gated is lowered by so much and not to nothing: a place that is gated still sounds like the recording. */
export const GATE_FLOOR_DB = -20;
/** A line begins to open so far above its noise, and is open at the second: steps between them would twitter. */
const OPENS_AT_DB = 6;
const OPEN_AT_DB = 12;
const OPENS_AT_RATIO = 10 ** (OPENS_AT_DB / 10);
const OPEN_AT_RATIO = 10 ** (OPEN_AT_DB / 10);
const FLOOR_GAIN = 10 ** (GATE_FLOOR_DB / 20);
/** Frames that overlap at each sample. */
const OVERLAP = 4;
/** Sum over the frames of the squared Hann window at this overlap. */
const WINDOW_SUM = (3 / 8) * OVERLAP;
/** A line closes by so much a frame, so that what rings out is not cut off. */
const RELEASE_DB_PER_STEP = 4;

/**
 * Lowers, line by line, what does not stand out of a noise: a spectral gate over a stream of samples.
 *
 * Frames of N samples under a Hann window, a quarter of a frame apart. With R the power of a line, smoothed over five lines, over that of
 * the noise in dB, the gain is -20 dB up to R = 6, 0 dB from R = 12, and a smoothstep of dB between. Each frame takes the largest gain of
 * itself and its two neighbours, and gains fall by 4 dB a frame at most: a click opens the gate before it comes and is left whole. Gains
 * are real, so phases stay; the output stands sample for sample where the input stands.
 *
 * @param profile from `NoiseProfiler`; lines of no power are always open
 * Input: full scale 1, finite. Silence gives silence.
 * Cost: two transforms for each N / 4 samples; memory 6 N.
 * Source: the short-time gain of S. F. Boll, IEEE Trans. ASSP 27 (1979) 113; overlap-add by J. B. Allen and L. R. Rabiner, Proc. IEEE 65
 *   (1977) 1558; gains smoothed over lines and time against musical noise is common practice.
 */
export class SpectralGate {
  readonly #size: number;
  readonly #hop: number;
  readonly #noise: Float64Array;
  readonly #fft: RealFft;
  readonly #window: Float32Array;
  readonly #frame: Float32Array;
  readonly #sum: Float32Array;
  /** Samples of the next step that are there already. */
  #filled = 0;
  #skip: number;
  #previous: GatedFrame | undefined;
  #beforeThat: Float64Array | undefined;
  #gainDb: Float64Array;

  constructor(profile: NoiseProfile) {
    this.#size = profile.size;
    this.#hop = profile.size / OVERLAP;
    this.#noise = profile.power;
    this.#fft = realFft(profile.size);
    this.#window = hannWindow(profile.size).weights;
    this.#frame = new Float32Array(profile.size);
    this.#sum = new Float32Array(profile.size);
    this.#skip = profile.size - this.#hop;
    this.#gainDb = new Float64Array(profile.power.length).fill(GATE_FLOOR_DB);
  }

  /** @returns samples that are finished, in order; they come `N + N / 4` samples late at most */
  push(samples: Float32Array): Float32Array {
    const hop = this.#hop;
    const done: Float32Array[] = [];
    for (let at = 0; at < samples.length;) {
      const taken = samples.subarray(at, at + hop - this.#filled);
      this.#frame.set(taken, this.#size - hop + this.#filled);
      this.#filled += taken.length;
      at += taken.length;
      if (this.#filled === hop) done.push(this.#step());
    }
    return join(done);
  }

  /** @returns the samples that were not returned yet, followed by some that are silent: the caller knows how many it pushed */
  finish(): Float32Array {
    return this.push(new Float32Array(this.#size + this.#hop));
  }

  /** Takes the frame that is full now, and finishes the one before it. */
  #step(): Float32Array {
    const next = this.#analyse();
    const finished = this.#previous ? this.#synthesise(this.#previous, next) : new Float32Array(0);
    this.#beforeThat = this.#previous?.openDb;
    this.#previous = next;
    this.#frame.copyWithin(0, this.#hop);
    this.#filled = 0;
    return finished;
  }

  #analyse(): GatedFrame {
    const { input } = this.#fft;
    for (let n = 0; n < this.#size; n++) input[n] = this.#frame[n]! * this.#window[n]!;
    this.#fft.transform();
    const spectrum = this.#fft.output.slice();
    const smooth = smoothLines(linePower(spectrum));
    return { spectrum, openDb: smooth.map((power, k) => openDb(power, this.#noise[k]!)) };
  }

  #synthesise(frame: GatedFrame, next: GatedFrame): Float32Array {
    for (let k = 0; k < this.#gainDb.length; k++) {
      const around = Math.max(frame.openDb[k]!, next.openDb[k]!, this.#beforeThat?.[k] ?? GATE_FLOOR_DB);
      this.#gainDb[k] = Math.max(around, this.#gainDb[k]! - RELEASE_DB_PER_STEP);
    }
    this.#addBack(frame.spectrum);
    const finished = this.#sum.slice(Math.min(this.#skip, this.#hop), this.#hop);
    this.#skip = Math.max(0, this.#skip - this.#hop);
    this.#sum.copyWithin(0, this.#hop);
    this.#sum.fill(0, this.#size - this.#hop);
    return finished;
  }

  /**
   * The inverse transform of a real signal by the forward one: with h[k] = Re X[k] - Im X[k] and F the transform of h,
   * x[n] = (Re F[n] - Im F[n]) / N, since the Hartley transform is its own inverse.
   */
  #addBack(spectrum: Float32Array): void {
    const size = this.#size;
    const half = size / 2;
    const { input } = this.#fft;
    input[0] = spectrum[0]! * toGain(this.#gainDb[0]!);
    input[half] = spectrum[1]! * toGain(this.#gainDb[half]!);
    for (let k = 1; k < half; k++) {
      const gain = toGain(this.#gainDb[k]!);
      input[k] = gain * (spectrum[2 * k]! - spectrum[2 * k + 1]!);
      input[size - k] = gain * (spectrum[2 * k]! + spectrum[2 * k + 1]!);
    }
    this.#fft.transform();
    const { output } = this.#fft;
    const sum = this.#sum;
    const weights = this.#window;
    const scale = 1 / (size * WINDOW_SUM);
    sum[0]! += output[0]! * weights[0]! * scale;
    sum[half]! += output[1]! * weights[half]! * scale;
    for (let n = 1; n < half; n++) {
      sum[n]! += (output[2 * n]! - output[2 * n + 1]!) * weights[n]! * scale;
      sum[size - n]! += (output[2 * n]! + output[2 * n + 1]!) * weights[size - n]! * scale;
    }
  }
}

interface GatedFrame {
  spectrum: Float32Array;
  /** Gain of each line from this frame alone. */
  openDb: Float64Array;
}

function openDb(power: number, noise: number): number {
  if (noise === 0 || power >= OPEN_AT_RATIO * noise) return 0;
  if (power <= OPENS_AT_RATIO * noise) return GATE_FLOOR_DB;
  const share = (10 * Math.log10(power / noise) - OPENS_AT_DB) / (OPEN_AT_DB - OPENS_AT_DB);
  return GATE_FLOOR_DB * (1 - share * share * (3 - 2 * share));
}

function toGain(db: number): number {
  if (db === GATE_FLOOR_DB) return FLOOR_GAIN;
  return db === 0 ? 1 : 10 ** (db / 20);
}

function join(parts: readonly Float32Array[]): Float32Array {
  const whole = new Float32Array(parts.reduce((sum, part) => sum + part.length, 0));
  let at = 0;
  for (const part of parts) {
    whole.set(part, at);
    at += part.length;
  }
  return whole;
}
