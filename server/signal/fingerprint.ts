import type { Span } from './place-list.ts';
import { thirdOctave, type ThirdOctave } from './third-octaves.ts';

/** What one segment adds to the fingerprint, from its first whole step on; plain data. */
export interface FingerprintPart {
  firstStep: number;
  words: Uint16Array;
  coarse: Uint8Array;
  strengths: Float32Array;
}

/** A channel's fingerprint, a step of 0.1 s per place, from the first sample on. A word of 0 stands for none. */
export interface Fingerprint {
  words: Uint16Array;
  /** Three bits over four wide bands, and by how much the weakest of them was decided (natural logarithm; 0 for none). */
  coarse: Uint8Array;
  strengths: Float32Array;
}

/** Places `[from, to)` of mean squares, the first of which is of this band among `fingerprintBands`. */
export interface FingerprintRange {
  from: number;
  to: number;
  firstBand: number;
}

/** Time from one word to the next, whatever the sample rate. */
export const FINGERPRINT_STEP_S = 0.1;
/** Third octaves from 400 Hz to 16 kHz: what copies at lower rates and lossy ones keep at least in part. */
const FIRST_BAND = -4;
const LAST_BAND = 12;
const BANDS = LAST_BAND - FIRST_BAND + 1;
const BANDS_PER_WIDE = 4;
const WIDE_BANDS = 4;
export const COARSE_BITS = WIDE_BANDS - 1;
const WINDOW_STEPS = 8;
const SMALLEST_ENERGY = 1e-18;

export const fingerprintBands: readonly ThirdOctave[] = Array.from({ length: BANDS }, (_, k) =>
  thirdOctave(FIRST_BAND + k),
);

/**
 * A fingerprint of the course of band energies, which gain, another header, other rates and lossy coding leave mostly as it is.
 *
 * L[n][b]: log of the energy of third octave b, 400 Hz to 16 kHz, over the 0.8 s up to the end of step n of 0.1 s. Bit b of
 * word n is 1 where (L[n][b] - L[n][b + 1]) - (L[n - 8][b] - L[n - 8][b + 1]) > 0: gains and filters cancel out. The coarse bits
 * are the same of four octave-and-a-third bands from 400 Hz to 14 kHz. A band that the rate does not show gives bits of 0
 * beside it. The first 1.6 s of a segment have no words, for want of two windows.
 *
 * Cost: 50 ns per frame; 27 bytes per second in a part.
 * Source: J. Haitsma and T. Kalker, A highly robust audio fingerprinting system, ISMIR 2002 (there with other bands and times).
 */
export class FingerprintTracker {
  readonly #samplesPerStep: number;
  readonly #firstStep: number;
  readonly #steps: number;
  readonly #sums: Float64Array;
  readonly #weights: Float32Array;

  constructor(sampleRateHz: number, { startSample, endSample }: Span) {
    this.#samplesPerStep = FINGERPRINT_STEP_S * sampleRateHz;
    this.#firstStep = Math.ceil(startSample / this.#samplesPerStep);
    this.#steps = Math.max(0, Math.floor(endSample / this.#samplesPerStep) - this.#firstStep);
    this.#sums = new Float64Array(this.#steps * BANDS);
    this.#weights = new Float32Array(this.#steps * BANDS);
  }

  /** Adds what one short frame tells of some bands to the step that its middle lies in. */
  push(middleSample: number, meanSquares: Float32Array, range: FingerprintRange): void {
    this.#add(Math.floor(middleSample / this.#samplesPerStep) - this.#firstStep, 1, meanSquares, range);
  }

  /** The same of a frame that is long for a step: shared out over the two steps whose middles are nearest. */
  pushShared(middleSample: number, meanSquares: Float32Array, range: FingerprintRange): void {
    const place = middleSample / this.#samplesPerStep - 0.5;
    const step = Math.floor(place);
    const later = place - step;
    this.#add(step - this.#firstStep, 1 - later, meanSquares, range);
    this.#add(step + 1 - this.#firstStep, later, meanSquares, range);
  }

  finish(): FingerprintPart {
    const logs = windowLogs(this.#sums, this.#weights, 1);
    const wideLogs = windowLogs(this.#sums, this.#weights, BANDS_PER_WIDE);
    const words = new Uint16Array(this.#steps);
    const coarse = new Uint8Array(this.#steps);
    const strengths = new Float32Array(this.#steps);
    for (let step = 2 * WINDOW_STEPS - 1; step < this.#steps; step++) {
      words[step] = turnsAt(logs, BANDS, step).bits;
      const { bits, least } = turnsAt(wideLogs, WIDE_BANDS, step);
      coarse[step] = bits;
      strengths[step] = Number.isFinite(least) ? least : 0;
    }
    return { firstStep: this.#firstStep, words, coarse, strengths };
  }

  #add(step: number, weight: number, meanSquares: Float32Array, range: FingerprintRange): void {
    if (step < 0 || step >= this.#steps) return;
    const sums = this.#sums;
    const weights = this.#weights;
    const shift = step * BANDS + range.firstBand - range.from;
    for (let band = range.from; band < range.to; band++) {
      sums[shift + band]! += weight * meanSquares[band]!;
      weights[shift + band]! += weight;
    }
  }
}

/** Logs of the energies of whole windows, in bands of `perBand` third octaves; NaN where a step has no frame of one. */
function windowLogs(sums: Float64Array, weights: Float32Array, perBand: number): Float64Array {
  const steps = sums.length / BANDS;
  const bands = Math.floor(BANDS / perBand);
  const energies = new Float64Array(steps * bands);
  const logs = new Float64Array(steps * bands).fill(Number.NaN);
  for (let at = 0; at < energies.length; at++) {
    const first = Math.floor(at / bands) * BANDS + (at % bands) * perBand;
    let energy = 0;
    for (let band = first; band < first + perBand; band++) energy += sums[band]! / weights[band]!;
    energies[at] = energy;
  }
  for (let at = (WINDOW_STEPS - 1) * bands; at < logs.length; at++) {
    let energy = SMALLEST_ENERGY;
    for (let back = 0; back < WINDOW_STEPS; back++) energy += energies[at - back * bands]!;
    logs[at] = Math.log(energy);
  }
  return logs;
}

/** How the slope from band to band has turned since the window before, as bits; and the least turn of all. */
function turnsAt(logs: Float64Array, bands: number, step: number): { bits: number; least: number } {
  const now = step * bands;
  const before = now - WINDOW_STEPS * bands;
  let bits = 0;
  let least = Infinity;
  for (let band = 0; band < bands - 1; band++) {
    const slope = logs[now + band]! - logs[now + band + 1]!;
    const turn = slope - (logs[before + band]! - logs[before + band + 1]!);
    if (turn > 0) bits |= 1 << band;
    least = Math.min(least, Math.abs(turn));
  }
  return { bits, least };
}

export function joinFingerprint(parts: readonly FingerprintPart[]): Fingerprint {
  const length = Math.max(0, ...parts.map(({ firstStep, words }) => firstStep + words.length));
  const joined = {
    words: new Uint16Array(length),
    coarse: new Uint8Array(length),
    strengths: new Float32Array(length),
  };
  for (const { firstStep, words, coarse, strengths } of parts) {
    joined.words.set(words, firstStep);
    joined.coarse.set(coarse, firstStep);
    joined.strengths.set(strengths, firstStep);
  }
  return joined;
}
