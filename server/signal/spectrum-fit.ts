import type { SourceSignal } from './band-energy.ts';
import { inverseFft, type InverseFft } from './complex-fft.ts';
import { differencedSpectrum, responseOf } from './differenced-spectrum.ts';
import { MOST_POINTS, TAIL_DECAYS, type WindowPlan } from './sine-windows.ts';

/** Decays are looked for down to a kind's own over this. */
export const MOST_SHRINKING = 4;
/** Steps of frequency are 1 / (4 decay): half a step off costs 13 % of the statistic at most. */
const STEPS_PER_BANDWIDTH = 4;

/** Onset and decay in samples of the source from the begin of the window. */
export interface FittedWindow {
  readonly onset: number;
  readonly frequencyHz: number;
  readonly decay: number;
  readonly statistic: number;
}

/** What the last statistic was made of: steps along one axis share the rest. */
function nothingHeld() {
  const lines = () => new Float64Array(MOST_POINTS);
  return {
    onset: NaN,
    turnedRe: lines(),
    turnedIm: lines(),
    frequencyHz: NaN,
    decay: NaN,
    direction: 1,
    norm: NaN,
    answerRe: lines(),
    answerIm: lines(),
  };
}

/** The whitened spectrum of one window, and the likelihood of damped sines in it. */
export class SpectrumFit {
  readonly #rateHz: number;
  #size = 0;
  #points = MOST_POINTS;
  #firstBin = 0;
  #bins = 0;
  readonly #re = new Float64Array(MOST_POINTS);
  readonly #im = new Float64Array(MOST_POINTS);
  readonly #inverse = new Float64Array(MOST_POINTS);
  readonly #held = nothingHeld();

  constructor(rateHz: number) {
    this.#rateHz = rateHz;
  }

  /** Takes the window that begins at `first`, in a band, divided by the noise's power. */
  load(
    source: SourceSignal,
    first: number,
    { size, taper, kind }: WindowPlan,
    band: {
      lowHz: number;
      highHz: number;
      skirtHz: number;
      inverseLevels: Float64Array;
      levelStepHz: number;
    },
  ): void {
    const output = differencedSpectrum(source, first, size, taper);
    const response = responseOf(size);
    const binHz = this.#rateHz / size;
    const { lowHz, highHz, skirtHz } = band;
    const firstBin = Math.max(1, Math.ceil((lowHz - skirtHz) / binHz));
    const last = Math.min(size / 2 - 1, Math.floor((highHz + skirtHz) / binHz), firstBin + kind.points - 1);
    this.#held.onset = NaN;
    this.#held.frequencyHz = NaN;
    this.#size = size;
    this.#points = kind.points;
    this.#firstBin = firstBin;
    this.#bins = last - firstBin + 1;
    for (let k = 0, bin = firstBin; bin <= last; k++, bin++) {
      const level = band.inverseLevels[Math.round((bin * binHz) / band.levelStepHz)] ?? 0;
      // What leaks in from a tone beyond the skirt must not begin with a step.
      const outside = Math.max(lowHz - bin * binHz, bin * binHz - highHz, 0) / skirtHz;
      const inverse = ((1 - outside) * level) / source.decimation;
      const scale = inverse / response[bin]!;
      this.#inverse[k] = inverse;
      this.#re[k] = output[2 * bin]! * scale;
      this.#im[k] = output[2 * bin + 1]! * scale;
    }
  }

  /** The best of a grid of onsets and frequencies for one decay. */
  scan(range: {
    lowHz: number;
    highHz: number;
    earliest: number;
    latest: number;
    decay: number;
  }): FittedWindow {
    const fft = this.#baseband();
    const { lowHz, highHz, decay } = range;
    const samplesPerPoint = this.#size / this.#points;
    const binHz = this.#rateHz / this.#size;
    const from = Math.max(0, Math.ceil(range.earliest / samplesPerPoint));
    const to = Math.min(this.#points - 1, Math.floor(range.latest / samplesPerPoint));
    const end = Math.min(this.#points - 1, Math.ceil(to + (TAIL_DECAYS * decay) / samplesPerPoint));
    const shrink = Math.exp(-samplesPerPoint / decay);
    const stepHz = this.#rateHz / (STEPS_PER_BANDWIDTH * decay);
    const count = Math.max(1, Math.round((highHz - lowHz) / stepHz));
    const scale = (2 * (1 - shrink * shrink)) / (this.#points * this.#size);
    let best: FittedWindow = { onset: 0, frequencyHz: lowHz, decay, statistic: 0 };
    for (let k = 0; k <= count; k++) {
      const frequencyHz = lowHz + (k / count) * (highHz - lowHz);
      const offset = frequencyHz / binHz - this.#firstBin;
      const inverse = this.#inverse[Math.round(offset)] ?? 0;
      if (!(inverse > 0)) continue;
      const turn = (2 * Math.PI * offset) / this.#points;
      const peak = strongest(fft, {
        cosine: shrink * Math.cos(turn),
        sine: shrink * Math.sin(turn),
        from,
        to,
        end,
      });
      const statistic = (peak.power * scale) / inverse;
      if (statistic > best.statistic)
        best = { onset: peak.at * samplesPerPoint, frequencyHz, decay, statistic };
    }
    return best;
  }

  /** The best by steps of halving size in onset, frequency and decay; given up where the first round does not reach `hopeful`. */
  refine(coarse: FittedWindow, hopeful: number): FittedWindow {
    let best = { ...coarse, statistic: this.statisticAt(coarse, 1) };
    let onsetStep = this.#size / this.#points / 2;
    let frequencyStep = this.#rateHz / (2 * STEPS_PER_BANDWIDTH * coarse.decay);
    let decayFactor = 1.4;
    for (let round = 0; round < 5; round++) {
      for (const step of [
        { onset: onsetStep, frequencyHz: 0, factor: 1 },
        { onset: 0, frequencyHz: frequencyStep, factor: 1 },
        { onset: 0, frequencyHz: 0, factor: decayFactor },
      ]) {
        best = this.#climb(best, step, coarse.decay / MOST_SHRINKING);
      }
      if (best.statistic < hopeful) return best;
      onsetStep /= 2;
      frequencyStep /= 2;
      decayFactor = Math.sqrt(decayFactor);
    }
    return best;
  }

  /** @param direction 1 for a sine that begins at the onset, -1 for one that grows up to it. */
  statisticAt(sine: Omit<FittedWindow, 'statistic'>, direction: 1 | -1): number {
    this.#turnBack(sine.onset);
    const norm = this.#answer(sine.frequencyHz, sine.decay, direction);
    const { turnedRe, turnedIm, answerRe, answerIm } = this.#held;
    let sumRe = 0;
    let sumIm = 0;
    for (let k = 0; k < this.#bins; k++) {
      const xr = turnedRe[k]!;
      const xi = turnedIm[k]!;
      const pr = answerRe[k]!;
      const pi = answerIm[k]!;
      sumRe += xr * pr - xi * pi;
      sumIm += xi * pr + xr * pi;
    }
    return norm > 0 ? (2 * (sumRe * sumRe + sumIm * sumIm)) / (norm * this.#size) : 0;
  }

  /** Turns the lines so that the window begins at an onset; done already where it is the one of the last call. */
  #turnBack(onset: number): void {
    const held = this.#held;
    if (held.onset === onset) return;
    held.onset = onset;
    const { turnedRe, turnedIm } = held;
    const re = this.#re;
    const im = this.#im;
    const step = ((2 * Math.PI) / this.#size) * onset;
    const stepCos = Math.cos(step);
    const stepSin = Math.sin(step);
    let cosine = Math.cos(this.#firstBin * step);
    let sine = Math.sin(this.#firstBin * step);
    for (let k = 0; k < this.#bins; k++) {
      turnedRe[k] = re[k]! * cosine - im[k]! * sine;
      turnedIm[k] = re[k]! * sine + im[k]! * cosine;
      const next = cosine * stepCos - sine * stepSin;
      sine = cosine * stepSin + sine * stepCos;
      cosine = next;
    }
  }

  /** The conjugate spectrum of a damped oscillation, and the sum of its squares over the noise, likewise. */
  #answer(frequencyHz: number, decay: number, direction: 1 | -1): number {
    const held = this.#held;
    if (held.frequencyHz === frequencyHz && held.decay === decay && held.direction === direction)
      return held.norm;
    const { answerRe, answerIm } = held;
    const inverse = this.#inverse;
    const rate = 1 / decay;
    const binStep = (2 * Math.PI) / this.#size;
    const detune = this.#firstBin * binStep - (2 * Math.PI * frequencyHz) / this.#rateHz;
    let norm = 0;
    for (let k = 0; k < this.#bins; k++) {
      // conj(1 / (rate + i w)) = (rate + i w) / (rate^2 + w^2).
      const w = direction * (detune + k * binStep);
      const size = 1 / (rate * rate + w * w);
      answerRe[k] = rate * size;
      answerIm[k] = w * size;
      norm += inverse[k]! * size;
    }
    held.frequencyHz = frequencyHz;
    held.decay = decay;
    held.direction = direction;
    held.norm = norm;
    return norm;
  }

  #climb(
    start: FittedWindow,
    step: { onset: number; frequencyHz: number; factor: number },
    leastDecay: number,
  ): FittedWindow {
    let best = start;
    for (const sign of [1, -1]) {
      for (let tries = 0; tries < 3; tries++) {
        const next = {
          onset: best.onset + sign * step.onset,
          frequencyHz: best.frequencyHz + sign * step.frequencyHz,
          decay: best.decay * step.factor ** sign,
        };
        const statistic = this.statisticAt(next, 1);
        if (statistic <= best.statistic || next.decay < leastDecay) break;
        best = { ...next, statistic };
      }
      // The other way lies what was left behind.
      if (best !== start) break;
    }
    return best;
  }

  #baseband(): InverseFft {
    const fft = inverseFft(this.#points);
    fft.re.fill(0);
    fft.im.fill(0);
    for (let k = 0; k < this.#bins; k++) {
      fft.re[fft.slot[k]!] = this.#re[k]!;
      fft.im[fft.slot[k]!] = this.#im[k]!;
    }
    fft.transform();
    return fft;
  }
}

interface Backward {
  /** The pole: shrink times exp(-i turn). */
  readonly cosine: number;
  readonly sine: number;
  readonly from: number;
  readonly to: number;
  readonly end: number;
}

/** Where y[n] = z[n] + c conj-turned y[n + 1] has its greatest power between `from` and `to`. */
function strongest({ re, im }: InverseFft, { cosine, sine, from, to, end }: Backward) {
  let yr = 0;
  let yi = 0;
  let n = end;
  for (; n > to; n--) {
    const next = re[n]! + cosine * yr + sine * yi;
    yi = im[n]! + cosine * yi - sine * yr;
    yr = next;
  }
  let power = 0;
  let at = from;
  for (; n >= from; n--) {
    const next = re[n]! + cosine * yr + sine * yi;
    yi = im[n]! + cosine * yi - sine * yr;
    yr = next;
    const here = yr * yr + yi * yi;
    if (here > power) {
      power = here;
      at = n;
    }
  }
  return { power, at };
}
