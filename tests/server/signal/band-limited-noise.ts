import { clicksOver, humAndNoise, seededNormal, seededUniform, type TrueClick } from './synthetic-clicks.ts';

/** Noise recorded at one rate and converted to a higher one: above half the first there is nothing of its own. */
export interface BandLimitedOptions {
  readonly recordedHz: number;
  readonly sampleRateHz: number;
  readonly seconds: number;
  readonly seed: number;
  readonly colour: 'white' | 'pink and hum';
  /** Whether the samples are rounded to 16 bits, so that rounding noise fills the empty band. */
  readonly rounds: boolean;
  /** Clicks of 2 to 15 kHz per second, at 15 dB over the pink noise about them. */
  readonly clicksPerSecond: number;
}

const HALF_TAPS = 96;
const CUTOFF = 0.97;
const KAISER_BETA = 9;
/** White noise that has in the octave about 15 kHz what pink noise has in each. */
const WHITE_DENSITY = 1e-6 / 10_600;

/** @returns samples at the higher rate, and the clicks with their onsets in them. */
export function bandLimitedScene(options: BandLimitedOptions): {
  samples: Float32Array;
  clicks: TrueClick[];
} {
  const { recordedHz, sampleRateHz, seconds, seed, rounds, clicksPerSecond } = options;
  const base = { sampleRateHz: recordedHz, seconds, seed };
  const background = options.colour === 'white' ? whiteNoise(base) : humAndNoise(base);
  const recorded = clicksOver(background, {
    ...base,
    ratePerSecond: clicksPerSecond,
    snrDb: [15, 15],
    frequencyHz: [2000, 15_000],
    cycles: [15, 60],
  });
  const samples = converted(recorded.samples, recordedHz, sampleRateHz);
  const ratio = sampleRateHz / recordedHz;
  return {
    samples: rounds ? samples.map((value) => Math.round(32_768 * value) / 32_768) : samples,
    clicks: recorded.clicks.map((click) => ({ ...click, onset: (click.onset - HALF_TAPS) * ratio })),
  };
}

function whiteNoise({
  sampleRateHz,
  seconds,
  seed,
}: {
  sampleRateHz: number;
  seconds: number;
  seed: number;
}) {
  const normal = seededNormal(seededUniform(seed));
  const rms = Math.sqrt((WHITE_DENSITY * sampleRateHz) / 2);
  return Float32Array.from({ length: Math.round(seconds * sampleRateHz) }, () => rms * normal());
}

/**
 * Polyphase conversion between rates that are whole numbers of hertz, by a sinc in Kaiser's window: 90 dB down from half the lower rate. What
 * the filter would have to guess at both ends is left out: the first sample is that at HALF_TAPS.
 */
function converted(samples: Float32Array, fromHz: number, toHz: number): Float32Array {
  const phases = toHz / greatestDivisor(fromHz, toHz);
  const taps = Array.from({ length: phases }, (_, phase) => tapsOf(phase / phases));
  const step = (phases * fromHz) / toHz;
  const count = Math.floor(((samples.length - 1 - 2 * HALF_TAPS) * toHz) / fromHz);
  return Float32Array.from({ length: count }, (_, n) => {
    const at = n * step;
    const first = Math.floor(at / phases) + 1;
    const weights = taps[at % phases]!;
    let sum = 0;
    for (let k = 0; k < weights.length; k++) sum += weights[k]! * samples[first + k]!;
    return sum;
  });
}

function tapsOf(fraction: number): Float64Array {
  return Float64Array.from({ length: 2 * HALF_TAPS }, (_, k) => {
    const x = k - HALF_TAPS + 1 - fraction;
    const turn = Math.PI * CUTOFF * x;
    const sinc = turn === 0 ? 1 : Math.sin(turn) / turn;
    const inside = Math.max(0, 1 - (x / HALF_TAPS) ** 2);
    return (CUTOFF * sinc * bessel(KAISER_BETA * Math.sqrt(inside))) / bessel(KAISER_BETA);
  });
}

/** Modified Bessel function of the first kind and order 0, by its series. */
function bessel(x: number): number {
  let sum = 1;
  let term = 1;
  for (let k = 1; k < 60; k++) {
    term *= (x / (2 * k)) ** 2;
    sum += term;
  }
  return sum;
}

function greatestDivisor(a: number, b: number): number {
  return b === 0 ? a : greatestDivisor(b, a % b);
}
