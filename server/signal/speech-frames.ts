import { realFft, type RealFft } from './fft.ts';
import { sumOf } from './frame-spectrum.ts';

/** Band of speech as a telephone carries it. */
const LEVEL_BAND_HZ = { low: 300, high: 3400 };
/** Voices of grown people and children. */
export const PITCH_HZ = { low: 70, high: 400 };
/** Harmonics above this are smeared by the glide of a voice within a frame. */
const HIGHEST_HARMONIC_HZ = 1500;
/** How far a line must stand over its quiet power to count: noise alone does so in one line of ten. */
const STANDS_OUT = 6;
const HIGHEST_DECADES = 4;
const SMALLEST_POWER = 1e-14;
const DECADES_PER_BIT = Math.log10(2) / 2 ** 23;
const DECADES_OF_ONE = 127 * Math.log10(2);
const FALL_SHARE = 0.2;
const RISE_DB_PER_S = 3;
const LEARNING_FRAMES = 16;
const LEARNING_RANK = 2;
/** Of two equally good pitches the higher one is it: half of it fits as well. */
const LONG_LAG_DISCOUNT = 0.1;
/** One resonance that rings has a pitch as well; a voice has a series of harmonics. */
const LOOKED_AT_HARMONICS = 8;
const LEAST_HARMONICS = 4;
const LEAST_SALIENCE = 0.2;
/** Noise alone stands out by 1 dB: no pitch is looked for under this. */
const LEAST_LEVEL_DB = 1.6;
const LEVEL_STEPS_PER_DB = 5;
const PITCH_STEPS_PER_OCTAVE = 100;

/** One byte of each kind per frame; plain data. */
export interface SpeechFrames {
  /** How far the lines from 300 to 3400 Hz stand out on average, in fifths of a decibel. */
  levels: Uint8Array;
  /** 1 + hundredths of an octave over 70 Hz; 0 where no harmonic series stands out. */
  pitches: Uint8Array;
}

export function levelDbOf(code: number): number {
  return code / LEVEL_STEPS_PER_DB;
}

/** Octaves over 70 Hz. */
export function pitchOctavesOf(code: number): number {
  return (code - 1) / PITCH_STEPS_PER_OCTAVE;
}

/**
 * What of each frame could be a voice: how far the telephone band stands out of its quiet, and the pitch of its harmonics.
 *
 * Each line is compared with its own quiet power, which falls fast and rises by 3 dB per second, so that steady lines of
 * machines drop out. w = log10(P / 6 quiet), from 0 to 4. Level: mean of 10 w from 300 to 3400 Hz. Pitch: the lag from 2.5 to
 * 14.3 ms at which the transform of w, 70 to 1500 Hz, is highest (an autocorrelation of the whitened frame).
 *
 * Frames of about 64 ms, hop half, from a signal of 8 to 16 kHz. Cost: 3 microseconds per frame of 512.
 * Source: A. M. Noll, Cepstrum pitch determination, JASA 41 (1967) 293 (transform of the log spectrum).
 */
export class SpeechFrameTracker {
  readonly #rateHz: number;
  readonly #fft: RealFft;
  readonly #rise: number;
  readonly #salience: Float32Array;
  /** A float and its bits, which are its logarithm to within 0.03 decades: a true one would cost more than all the rest. */
  readonly #ratio = new Float32Array(1);
  readonly #ratioBits = new Int32Array(this.#ratio.buffer);
  /** Lines that are looked at. */
  readonly #lines: number;
  readonly #levels: number[] = [];
  readonly #pitches: number[] = [];
  #learning: Float32Array[] | null = [];
  #quiet: Float64Array;

  /** @param size samples per frame. @param rateHz of the signal that the frames are taken from. */
  constructor({ size, rateHz }: { size: number; rateHz: number }) {
    this.#rateHz = rateHz;
    this.#fft = realFft(size);
    this.#rise = 10 ** ((RISE_DB_PER_S * (size / 2 / rateHz)) / 10);
    this.#salience = new Float32Array(size / 2);
    this.#lines = Math.min(size / 2, Math.floor((LEVEL_BAND_HZ.high * size) / rateHz) + 1);
    this.#quiet = new Float64Array(size / 2);
  }

  /** @param power lines from 0 as `FrameSpectrum` scales them. */
  push(power: Float32Array): void {
    if (!this.#learning) {
      this.#judge(power);
      return;
    }
    this.#learning.push(power.slice());
    if (this.#learning.length === LEARNING_FRAMES) this.#learn();
  }

  finish(): SpeechFrames {
    this.#learn();
    return { levels: Uint8Array.from(this.#levels), pitches: Uint8Array.from(this.#pitches) };
  }

  #learn(): void {
    const frames = this.#learning;
    this.#learning = null;
    if (!frames) return;
    this.#quiet = this.#quiet.map((_, k) => {
      const sorted = frames.map((power) => power[k]!).sort((a, b) => a - b);
      return sorted[Math.min(LEARNING_RANK, sorted.length - 1)] ?? 0;
    });
    for (const power of frames) this.#judge(power);
  }

  #judge(power: Float32Array): void {
    this.#weigh(power);
    const binHz = this.#rateHz / this.#fft.size;
    const first = Math.ceil(LEVEL_BAND_HZ.low / binHz);
    const lines = this.#lines - first;
    const levelDb = lines > 0 ? (10 * sumOf(this.#salience, first, this.#lines)) / lines : 0;
    this.#levels.push(Math.min(255, Math.round(levelDb * LEVEL_STEPS_PER_DB)));
    this.#pitches.push(levelDb < LEAST_LEVEL_DB ? 0 : this.#findPitch(binHz));
  }

  #weigh(power: Float32Array): void {
    const quiet = this.#quiet;
    const salience = this.#salience;
    const rise = this.#rise;
    const ratio = this.#ratio;
    const ratioBits = this.#ratioBits;
    for (let k = 1; k < this.#lines; k++) {
      const value = power[k]!;
      const before = quiet[k]!;
      // Without a branch, which would be guessed wrong at every second line of noise.
      const followed = Math.min(before * rise, before + FALL_SHARE * (value - before));
      const now = Math.max(followed, SMALLEST_POWER);
      quiet[k] = now;
      const least = STANDS_OUT * now;
      salience[k] = 0;
      if (value <= least) continue;
      ratio[0] = value / least;
      salience[k] = Math.min(HIGHEST_DECADES, ratioBits[0]! * DECADES_PER_BIT - DECADES_OF_ONE);
    }
  }

  #findPitch(binHz: number): number {
    const { input, size } = this.#fft;
    const salience = this.#salience;
    const end = Math.min(size / 2, Math.floor(HIGHEST_HARMONIC_HZ / binHz) + 1);
    input.fill(0);
    for (let k = Math.ceil(PITCH_HZ.low / binHz); k < end; k++) {
      input[k] = salience[k]!;
      input[size - k] = salience[k]!;
    }
    this.#fft.transform();
    const pitchHz = this.#rateHz / this.#bestLag(this.#fft.output);
    if (pitchHz === 0 || this.#harmonicsOf(pitchHz / binHz) < LEAST_HARMONICS) return 0;
    const octaves = Math.log2(pitchHz / PITCH_HZ.low);
    return Math.max(1, Math.min(255, 1 + Math.round(octaves * PITCH_STEPS_PER_OCTAVE)));
  }

  /** @param output of the transform: the value at lag n is the real part 2 n. @returns infinity where no lag stands out. */
  #bestLag(output: Float32Array): number {
    const longest = Math.min(this.#fft.size / 2 - 2, Math.ceil(this.#rateHz / PITCH_HZ.low));
    const discount = LONG_LAG_DISCOUNT / longest;
    let best = 0;
    let bestLag = 0;
    for (let lag = Math.max(2, Math.floor(this.#rateHz / PITCH_HZ.high)); lag <= longest; lag++) {
      const value = output[2 * lag]!;
      if (value <= output[2 * lag - 2]! || value < output[2 * lag + 2]!) continue;
      const score = value * (1 - discount * lag);
      if (score <= best) continue;
      best = score;
      bestLag = lag;
    }
    if (bestLag === 0) return Infinity;
    const [before, at, after] = [output[2 * bestLag - 2]!, output[2 * bestLag]!, output[2 * bestLag + 2]!];
    const bend = before - 2 * at + after;
    return bestLag + (bend < 0 ? (before - after) / (2 * bend) : 0);
  }

  /** How many of the first multiples of a pitch stand out, and over the middle between them and the next. */
  #harmonicsOf(pitchLines: number): number {
    const salience = this.#salience;
    let count = 0;
    for (let harmonic = 1; harmonic <= LOOKED_AT_HARMONICS; harmonic++) {
      const line = Math.round(harmonic * pitchLines);
      const between = Math.round((harmonic + 0.5) * pitchLines);
      if (between >= salience.length) break;
      const peak = Math.max(salience[line - 1]!, salience[line]!, salience[line + 1]!);
      if (peak > LEAST_SALIENCE && peak > salience[between]!) count++;
    }
    return count;
  }
}
