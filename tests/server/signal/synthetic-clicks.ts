/** A click whose onset is known: A exp(-t / tau) sin(2 pi f t) from its onset on. */
export interface TrueClick {
  readonly onset: number;
  readonly frequencyHz: number;
  readonly decayS: number;
  readonly amplitude: number;
}

export interface ClickScene {
  readonly samples: Float32Array;
  readonly clicks: readonly TrueClick[];
}

export interface SceneOptions {
  readonly sampleRateHz: number;
  readonly seconds: number;
  readonly seed: number;
  /** Clicks per second; 0 gives hum and noise alone. */
  readonly ratePerSecond: number;
  readonly snrDb: readonly [number, number];
  readonly frequencyHz: readonly [number, number];
  /** Cycles within the decay time. */
  readonly cycles: readonly [number, number];
  readonly longestDecayS?: number;
  /** A second click after each one, at a distance between these. */
  readonly followedAfterS?: readonly [number, number];
}

/** Uniform numbers from 0 to 1 (mulberry32). */
export function seededUniform(seed: number): () => number {
  let state = seed >>> 0;
  return () => {
    state = (state + 0x6d2b79f5) >>> 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return ((mixed ^ (mixed >>> 14)) >>> 0) / 4294967296;
  };
}

/** Normal numbers of variance 1, by the polar form of Box and Muller. */
export function seededNormal(uniform: () => number): () => number {
  let spare: number | null = null;
  return () => {
    if (spare !== null) {
      const kept = spare;
      spare = null;
      return kept;
    }
    for (;;) {
      const u = 2 * uniform() - 1;
      const v = 2 * uniform() - 1;
      const square = u * u + v * v;
      if (square >= 1 || square === 0) continue;
      const scale = Math.sqrt((-2 * Math.log(square)) / square);
      spare = v * scale;
      return u * scale;
    }
  };
}

const OCTAVE_RMS = 0.001;
const HUM_HZ = 49.7;

/**
 * Damped sines of known onset in pink noise and a compressor's hum.
 *
 * The noise has equal power in every octave (first-order sections a factor of two apart), rms 0.001 in each; the hum has
 * 24 harmonics, the first 40 dB over an octave's noise, falling by 12 dB per octave, its strength swaying by 10 % at 0.7 Hz. The SNR
 * is the click's peak over the noise within half an octave either side of its frequency, which is that octave's rms.
 */
export function clickScene(options: SceneOptions): ClickScene {
  const uniform = seededUniform(options.seed);
  const samples = humAndNoise(options, uniform);
  const clicks = placeClicks(options, samples.length, uniform);
  for (const click of clicks) addClick(samples, click, options.sampleRateHz);
  return { samples, clicks };
}

/** The background of such a scene. */
export function humAndNoise(
  { sampleRateHz, seconds, seed }: Pick<SceneOptions, 'sampleRateHz' | 'seconds' | 'seed'>,
  uniform = seededUniform(seed),
): Float32Array {
  const samples = pinkNoise(Math.round(seconds * sampleRateHz), sampleRateHz, seededNormal(uniform));
  addHum(samples, sampleRateHz);
  return samples;
}

/** Clicks in a copy of a background. */
export function clicksOver(background: Float32Array, options: SceneOptions): ClickScene {
  const samples = background.slice();
  const clicks = placeClicks(options, samples.length, seededUniform(options.seed));
  for (const click of clicks) addClick(samples, click, options.sampleRateHz);
  return { samples, clicks };
}

export function addClick(samples: Float32Array, click: TrueClick, sampleRateHz: number): void {
  const length = Math.min(
    samples.length - Math.ceil(click.onset),
    Math.ceil(12 * click.decayS * sampleRateHz),
  );
  const turn = (2 * Math.PI * click.frequencyHz) / sampleRateHz;
  const shrink = Math.exp(-1 / (click.decayS * sampleRateHz));
  const onset = Math.ceil(click.onset);
  let amplitude = click.amplitude * shrink ** (onset - click.onset);
  for (let n = onset; n < onset + length; n++) {
    samples[n] = (samples[n] ?? 0) + amplitude * Math.sin(turn * (n - click.onset));
    amplitude *= shrink;
  }
}

function placeClicks(options: SceneOptions, count: number, uniform: () => number): TrueClick[] {
  const { sampleRateHz, ratePerSecond } = options;
  const clicks: TrueClick[] = [];
  if (ratePerSecond === 0) return clicks;
  const pitch = sampleRateHz / ratePerSecond;
  // The first second is left to the learning of the floor, as a recording that begins before the freezing does.
  for (let slot = sampleRateHz; slot + pitch < count; slot += pitch) {
    const onset = Math.round(slot + (0.1 + 0.7 * uniform()) * pitch);
    clicks.push(drawClick(options, onset, uniform));
    if (!options.followedAfterS) continue;
    const after = between(options.followedAfterS, uniform) * sampleRateHz;
    clicks.push(drawClick(options, Math.round(onset + after), uniform));
  }
  return clicks;
}

function drawClick(options: SceneOptions, onset: number, uniform: () => number): TrueClick {
  const [lowHz, highHz] = options.frequencyHz;
  const frequencyHz = lowHz * (highHz / lowHz) ** uniform();
  const [few, many] = options.cycles;
  const decayS = Math.min(options.longestDecayS ?? Infinity, (few * (many / few) ** uniform()) / frequencyHz);
  const snrDb = between(options.snrDb, uniform);
  // A sine that decays within a few cycles peaks below its amplitude.
  const turn = 2 * Math.PI * frequencyHz * decayS;
  const tPeak = Math.atan(turn) / (2 * Math.PI * frequencyHz);
  const peak = Math.exp(-tPeak / decayS) * Math.sin(2 * Math.PI * frequencyHz * tPeak);
  return { onset, frequencyHz, decayS, amplitude: (OCTAVE_RMS * 10 ** (snrDb / 20)) / peak };
}

function between([low, high]: readonly [number, number], uniform: () => number): number {
  return low + (high - low) * uniform();
}

/** Sum of first-order low-passes whose corners lie an octave apart: within 0.3 dB of 1 / f from 100 Hz up. */
function pinkNoise(count: number, sampleRateHz: number, normal: () => number): Float32Array {
  const samples = new Float32Array(count);
  const corners: number[] = [];
  for (let corner = 20; corner < sampleRateHz; corner *= 2) corners.push(corner);
  const poles = Float64Array.from(corners, (corner) => Math.exp((-2 * Math.PI * corner) / sampleRateHz));
  const gains = Float64Array.from(corners, (corner, k) => (1 - (poles[k] ?? 0)) / Math.sqrt(corner));
  const states = new Float64Array(corners.length);
  for (let n = 0; n < count; n++) {
    const white = normal();
    let sum = 0;
    for (let k = 0; k < states.length; k++) {
      const state = (poles[k] ?? 0) * (states[k] ?? 0) + (gains[k] ?? 0) * white;
      states[k] = state;
      sum += state;
    }
    samples[n] = sum;
  }
  const scale = OCTAVE_RMS / octaveRms(samples, sampleRateHz);
  for (let n = 0; n < count; n++) samples[n] = (samples[n] ?? 0) * scale;
  return samples;
}

/** rms of the octave from fs/8 to fs/4 by the periodogram of the first blocks. */
function octaveRms(samples: Float32Array, sampleRateHz: number): number {
  const size = 256;
  let power = 0;
  const blocks = Math.min(200, Math.floor(samples.length / size));
  for (let block = 0; block < blocks; block++) {
    for (let bin = size / 8; bin < size / 4; bin++) {
      let re = 0;
      let im = 0;
      for (let n = 0; n < size; n++) {
        const value = (samples[block * size + n] ?? 0) * (0.5 - 0.5 * Math.cos((2 * Math.PI * n) / size));
        re += value * Math.cos((2 * Math.PI * bin * n) / size);
        im += value * Math.sin((2 * Math.PI * bin * n) / size);
      }
      power += (2 * (re * re + im * im)) / (0.375 * size * size);
    }
  }
  if (!(sampleRateHz > 0)) throw new RangeError('sampleRateHz must be above 0');
  return Math.sqrt(power / blocks);
}

function addHum(samples: Float32Array, sampleRateHz: number): void {
  const sway = (2 * Math.PI * 0.7) / sampleRateHz;
  const swaying = samples.map((_, n) => 1 + 0.1 * Math.sin(sway * n));
  for (let harmonic = 1; harmonic <= 24; harmonic++) {
    const frequencyHz = HUM_HZ * harmonic;
    if (frequencyHz > 0.45 * sampleRateHz) return;
    const amplitude = (Math.SQRT2 * OCTAVE_RMS * 100) / harmonic ** 2;
    const turn = (2 * Math.PI * frequencyHz) / sampleRateHz;
    // sin((n + 1) w) = 2 cos(w) sin(n w) - sin((n - 1) w)
    const twiceCosine = 2 * Math.cos(turn);
    let before = Math.sin(harmonic - turn);
    let here = Math.sin(harmonic);
    for (let n = 0; n < samples.length; n++) {
      samples[n] = samples[n]! + amplitude * swaying[n]! * here;
      const next = twiceCosine * here - before;
      before = here;
      here = next;
    }
  }
}
