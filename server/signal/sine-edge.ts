import type { SourceSignal } from './band-energy.ts';
import { inverseFft } from './complex-fft.ts';
import { DIFFERENCE_REACH, differencedSpectrum, responseOf } from './differenced-spectrum.ts';

/** What is known of the sine: onset and decay in samples of the source. */
export interface RoughSine {
  readonly onset: number;
  readonly frequencyHz: number;
  readonly decay: number;
}

const POINTS = 1024;
const HALF = POINTS / 2;
const turnCosines = Float64Array.from({ length: HALF }, (_, k) => Math.cos((2 * Math.PI * k) / POINTS));
const turnSines = Float64Array.from({ length: HALF }, (_, k) => Math.sin((2 * Math.PI * k) / POINTS));
/** Samples per point's step: a source whose octave lies in its upper half is read between its samples. */
const LENGTH_WIDTHS = 128;
const TAPER_SHARE = 1 / 32;
const LEAD_SHARE = 5 / 32;
const LOWEST_OF_FREQUENCY = 0.3;
/** About the rough onset so many periods, and decay times over the statistic, are searched. */
const REACH_PERIODS = 1;
const REACH_DECAYS = 3;
const STEPS_PER_PERIOD = 24;

/**
 * Places the onset of a damped sine whose frequency and decay are known, in the widest band there is: the edge is sharp only there.
 *
 * The window's spectrum is divided by the noise's and turned back; a one-pole filter run backwards gives the correlation with a damped
 * oscillation from each sample on. A body at rest begins to move from zero, so the likeliest onset is where the correlation
 * with exp(-t / decay) sin(2 pi f t), squared over its mean in noise, is greatest.
 */
export class SineEdge {
  readonly #source: SourceSignal;
  readonly #rateHz: number;
  readonly #size: number;
  /** One over what differencing and decimation do to each line, and the place of its level. */
  readonly #scales: Float64Array;
  readonly #levels: Uint8Array;
  /** Two real values to a complex one. */
  readonly #fft = inverseFft(HALF);
  readonly #re = new Float64Array(POINTS);
  readonly #im = new Float64Array(POINTS);

  /** @param widthHz W: the octave goes from W to 2 W. */
  constructor(source: SourceSignal, rateHz: number, widthHz: number, levelStepHz: number) {
    this.#source = source;
    this.#rateHz = rateHz;
    const size = Math.min(POINTS, 2 ** Math.round(Math.log2((LENGTH_WIDTHS * rateHz) / widthHz)));
    const response = responseOf(size);
    this.#size = size;
    this.#scales = Float64Array.from(
      { length: size / 2 },
      (_, bin) => 1 / (source.decimation * response[bin]!),
    );
    this.#levels = Uint8Array.from({ length: size / 2 }, (_, bin) =>
      Math.round((bin * rateHz) / size / levelStepHz),
    );
  }

  /**
   * @param statistic of the sine as found: what is left unsure of its onset.
   * @param inverseLevels one over the noise's power in the input at multiples of the level step; 0 where nothing is known.
   * @returns the rough onset where the source does not hold enough about it. The spread is that of the likelihoods.
   */
  place(rough: RoughSine, statistic: number, inverseLevels: Float64Array): { onset: number; spread: number } {
    const size = this.#size;
    const period = this.#rateHz / rough.frequencyHz;
    const wanted = REACH_PERIODS * period + (REACH_DECAYS * rough.decay) / Math.max(1, statistic);
    const reach = Math.min((LEAD_SHARE - 2 * TAPER_SHARE) * size, wanted);
    const first = Math.floor(rough.onset - LEAD_SHARE * size);
    const holds =
      first - DIFFERENCE_REACH >= this.#source.start && first + size + DIFFERENCE_REACH <= this.#source.end;
    if (!holds) return { onset: rough.onset, spread: reach };
    this.#whiten(first, LOWEST_OF_FREQUENCY * rough.frequencyHz, inverseLevels);
    this.#correlate(rough);
    const norm = this.#norm(rough, inverseLevels);
    const count = Math.ceil((reach / period) * STEPS_PER_PERIOD);
    const step = period / STEPS_PER_PERIOD;
    const values = Float64Array.from({ length: 2 * count + 1 }, (_, k) => {
      const sinePart = this.#sinePartAt(rough.onset - first + (k - count) * step, rough.frequencyHz);
      return sinePart ** 2 / norm;
    });
    return likeliest(values, rough.onset - count * step, step);
  }

  /** Leaves the whitened samples, POINTS to the window, in the transform: even ones in the real part, odd ones in the other. */
  #whiten(first: number, lowestHz: number, inverseLevels: Float64Array): void {
    const size = this.#size;
    const output = differencedSpectrum(this.#source, first, size, TAPER_SHARE * size);
    const scales = this.#scales;
    const levels = this.#levels;
    const binHz = this.#rateHz / size;
    const re = this.#re.fill(0);
    const im = this.#im.fill(0);
    for (let bin = Math.max(1, Math.ceil(lowestHz / binHz)); bin < size / 2; bin++) {
      const scale = inverseLevels[levels[bin]!]! * scales[bin]!;
      re[bin] = output[2 * bin]! * scale;
      im[bin] = output[2 * bin + 1]! * scale;
    }
    this.#turnToTime();
  }

  /**
   * z[n] = Re sum over k of X[k] exp(2 pi i k n / N) by a transform of half the length: with E = (X[k] + conj X[N/2 - k]) / 2 and
   * O = (X[k] - conj X[N/2 - k]) / 2 exp(2 pi i k / N), that of E + i O has z[2 m] + i z[2 m + 1].
   */
  #turnToTime(): void {
    const { re, im, slot } = this.#fft;
    const xRe = this.#re;
    const xIm = this.#im;
    for (let k = 0; k < HALF; k++) {
      const mirror = HALF - k;
      const differenceRe = (xRe[k]! - xRe[mirror]!) / 2;
      const differenceIm = (xIm[k]! + xIm[mirror]!) / 2;
      const cosine = turnCosines[k]!;
      const sine = turnSines[k]!;
      const at = slot[k]!;
      re[at] = (xRe[k]! + xRe[mirror]!) / 2 - (differenceRe * sine + differenceIm * cosine);
      im[at] = (xIm[k]! - xIm[mirror]!) / 2 + (differenceRe * cosine - differenceIm * sine);
    }
    this.#fft.transform();
  }

  /** Leaves y[n], the sum over m >= n of z[m] exp(-(m - n) / decay) exp(-i w m): turned back, so that it changes slowly. */
  #correlate({ frequencyHz, decay }: RoughSine): void {
    const { re: evens, im: odds } = this.#fft;
    const samplesPerPoint = this.#size / POINTS;
    const shrink = Math.exp(-samplesPerPoint / decay);
    const turn = ((2 * Math.PI * frequencyHz) / this.#rateHz) * samplesPerPoint;
    const cosine = Math.cos(turn);
    const sine = Math.sin(turn);
    let turnRe = Math.cos(turn * (POINTS - 1));
    let turnIm = -Math.sin(turn * (POINTS - 1));
    let re = 0;
    let im = 0;
    for (let n = POINTS - 1; n >= 0; n--) {
      const z = (n & 1 ? odds : evens)[n >> 1]!;
      re = z * turnRe + shrink * re;
      im = z * turnIm + shrink * im;
      this.#re[n] = re;
      this.#im[n] = im;
      const next = turnRe * cosine - turnIm * sine;
      turnIm = turnRe * sine + turnIm * cosine;
      turnRe = next;
    }
  }

  /** Mean square of the correlation with a damped sine in noise. */
  #norm({ frequencyHz, decay }: RoughSine, inverseLevels: Float64Array): number {
    const samplesPerPoint = this.#size / POINTS;
    const shrink = Math.exp(-samplesPerPoint / decay);
    const binHz = this.#rateHz / this.#size;
    const turnPerHz = (2 * Math.PI * samplesPerPoint) / this.#rateHz;
    // cos((k + 1) w) = 2 cos(w) cos(k w) - cos((k - 1) w)
    const twiceCosine = 2 * Math.cos(turnPerHz * binHz);
    let before = Math.cos(turnPerHz * -frequencyHz);
    let here = Math.cos(turnPerHz * (binHz - frequencyHz));
    let norm = 0;
    for (let bin = 1; bin < this.#size / 2; bin++) {
      norm += inverseLevels[this.#levels[bin]!]! / (1 - 2 * shrink * here + shrink * shrink);
      const next = twiceCosine * here - before;
      before = here;
      here = next;
    }
    return (norm * this.#size) / this.#source.decimation / 8;
  }

  /** Correlation with a damped sine from a place of the window on; y is read between its points by a line. */
  #sinePartAt(place: number, frequencyHz: number): number {
    const at = (place * POINTS) / this.#size;
    const n = Math.max(0, Math.min(POINTS - 2, Math.floor(at)));
    const share = at - n;
    const re = this.#re[n]! + share * (this.#re[n + 1]! - this.#re[n]!);
    const im = this.#im[n]! + share * (this.#im[n + 1]! - this.#im[n]!);
    const phase = (2 * Math.PI * frequencyHz * place) / this.#rateHz;
    return re * Math.sin(phase) + im * Math.cos(phase);
  }
}

function likeliest(
  values: Float64Array,
  firstPlace: number,
  step: number,
): { onset: number; spread: number } {
  let at = 0;
  for (let k = 1; k < values.length; k++) if (values[k]! > values[at]!) at = k;
  let weights = 0;
  let squares = 0;
  for (let k = 0; k < values.length; k++) {
    const weight = Math.exp((values[k]! - values[at]!) / 2);
    weights += weight;
    squares += weight * (k - at) ** 2;
  }
  return { onset: firstPlace + at * step, spread: Math.sqrt(squares / weights) * step };
}
