import { amplitudeToDb, amplitudeToVolts, dbAe, rmsToDb } from '../../shared/audio/units.ts';
import type { BurstParameters } from '../../shared/contract/measurement.ts';
import { burstSpectrum, centroidHz, energyAboutHearingLine, peakFrequencyHz } from './burst-spectrum.ts';
import { HEARING_LINE_HZ } from './hearing-line.ts';
import { seesBelowHearingLine } from './ultrasound-band.ts';

/** The noise a burst stands in: samples without it, or only their rms re full scale. */
export type BurstNoise = { readonly samples: Float32Array } | { readonly rmsFs: number };

export interface BurstContext {
  readonly sampleRateHz: number;
  /** Place of `samples[0]` in the recording. */
  readonly firstSample: number;
  /** Level that counts, re full scale, above 0: start, end and counts are by its crossings. */
  readonly thresholdFs: number;
  readonly noise: BurstNoise | null;
  /** Volts at the recorder's input at full scale; `null` where unknown. */
  readonly fullScaleV: number | null;
  readonly preampGainDb: number | null;
  /** What sensor and rate can see. */
  readonly observableLowHz: number;
  readonly observableHighHz: number;
  /** Magnitude that counts as clipped; 1 - 2^-15 without. */
  readonly clippedFromFs?: number;
  readonly onsetUncertaintyUs?: number | null;
}

export interface BurstOptions extends BurstContext {
  /** Where the burst is known to begin; else its first crossing. */
  readonly onsetSample?: number;
  /** Exclusive: the burst ends by here. */
  readonly endSample?: number;
  /** Time without a crossing that ends the burst; 0.5 ms without. */
  readonly quietGapS?: number;
}

export interface SpanOptions extends BurstContext {
  readonly startSample: number;
  readonly endSample: number;
}

/** Above 20 kHz less than a third of an octave is too little to say anything of. */
export const LEAST_ULTRASONIC_HIGH_HZ = HEARING_LINE_HZ * 2 ** (1 / 3);
export const BELOW_SHARE = 0.1;
export const ABOVE_SHARE = 0.9;
/** Shares are judged from here up, whatever the sensor sees. */
export const LOWEST_JUDGED_HZ = 1000;
const CLIPPED_FROM_FS = 1 - 2 ** -15;
const QUIET_GAP_S = 0.0005;

/**
 * Parameters of a burst, by threshold crossings.
 *
 * Start: the onset given, else the first sample with |x| at the threshold. End: one past the last such sample before a
 * quiet gap, 0.5 ms without a crossing. Rise time and duration count from the first crossing; counts are crossings of the
 * positive threshold upwards; energy is the sum of x^2 / fs from onset to end; average frequency is counts / duration; RA is
 * rise time in ms over peak volts at the recorder's input. Scaling samples and threshold leaves counts and times, a delay
 * leaves all but the places.
 *
 * @param samples one channel, re full scale, in the band that is to be judged.
 * @returns a burst of one sample at the onset where nothing reaches the threshold. NaN in the samples gives NaN.
 * Source: ASTM E1316, section B, and ISO 12716 (terms; paraphrased).
 */
export function measureBurst(samples: Float32Array, options: BurstOptions): BurstParameters {
  const { firstSample, thresholdFs, sampleRateHz } = options;
  const from = clampIndex((options.onsetSample ?? firstSample) - firstSample, samples.length);
  const to = clampIndex((options.endSample ?? firstSample + samples.length) - firstSample, samples.length);
  const gap = Math.max(1, Math.round((options.quietGapS ?? QUIET_GAP_S) * sampleRateHz));
  const first = firstCrossing(samples, from, to, thresholdFs);
  const end =
    first < to ? lastCrossing(samples, first, to, thresholdFs, gap) + 1 : Math.min(samples.length, from + 1);
  const start = options.onsetSample === undefined ? Math.min(first, samples.length - 1) : from;
  return describe(
    samples,
    { start, end: Math.max(end, start + 1), first: Math.min(first, end - 1) },
    options,
  );
}

/** The same parameters of a span that a person marked: begin and end are as marked. */
export function measureSpan(samples: Float32Array, options: SpanOptions): BurstParameters {
  const start = clampIndex(options.startSample - options.firstSample, samples.length - 1);
  const end = Math.max(start + 1, clampIndex(options.endSample - options.firstSample, samples.length));
  const first = firstCrossing(samples, start, end, options.thresholdFs);
  return describe(samples, { start, end, first: first < end ? first : start }, options);
}

/** Samples of the burst: begin, end (exclusive), first crossing of the threshold. */
interface BurstPlaces {
  readonly start: number;
  readonly end: number;
  readonly first: number;
}

function describe(samples: Float32Array, places: BurstPlaces, context: BurstContext): BurstParameters {
  const { start, end, first } = places;
  const { sampleRateHz, firstSample, fullScaleV } = context;
  const shape = shapeOf(samples, start, end, context.thresholdFs);
  const toUs = (count: number) => (count / sampleRateHz) * 1e6;
  const riseTimeUs = toUs(Math.max(0, shape.peakAt - first));
  const durationUs = toUs(Math.max(1, end - 1 - first));
  const volts = fullScaleV === null ? null : amplitudeToVolts(shape.peak, fullScaleV);
  const energyFs2S = shape.squares / sampleRateHz;
  const noiseRms = noiseRmsOf(context.noise);
  return {
    onsetSample: firstSample + start,
    endSample: firstSample + end,
    peakSample: firstSample + shape.peakAt,
    onsetUncertaintyUs: context.onsetUncertaintyUs ?? null,
    peakDb: amplitudeToDb(shape.peak),
    peakDbAe: volts === null || context.preampGainDb === null ? null : dbAe(volts, context.preampGainDb),
    riseTimeUs,
    durationUs,
    counts: shape.counts,
    energyFs2S,
    energyV2S: fullScaleV === null ? null : energyFs2S * fullScaleV ** 2,
    rmsDb: rmsToDb(Math.sqrt(shape.squares / (end - start))),
    averageFrequencyHz: shape.counts > 0 ? shape.counts / (durationUs / 1e6) : null,
    raMsPerV: volts === null || volts === 0 ? null : riseTimeUs / 1000 / volts,
    ...spectralParameters(samples.subarray(start, end), context),
    snrDb: noiseRms > 0 && shape.peak > 0 ? 20 * Math.log10(shape.peak / noiseRms) : null,
    clipped: shape.peak >= (context.clippedFromFs ?? CLIPPED_FROM_FS),
  };
}

function shapeOf(samples: Float32Array, start: number, end: number, threshold: number) {
  let peak = 0;
  let peakAt = start;
  let squares = 0;
  let counts = 0;
  let previous = -Infinity;
  for (let n = start; n < end; n++) {
    const value = samples[n] ?? 0;
    squares += value * value;
    if (Math.abs(value) > peak) {
      peak = Math.abs(value);
      peakAt = n;
    }
    if (value >= threshold && previous < threshold) counts += 1;
    previous = value;
  }
  return { peak, peakAt, squares, counts };
}

type SpectralParameters = Pick<
  BurstParameters,
  'peakFrequencyHz' | 'centroidHz' | 'ultrasonicShare' | 'hearingClass'
>;

function spectralParameters(burst: Float32Array, context: BurstContext): SpectralParameters {
  const { sampleRateHz, observableLowHz, observableHighHz, noise } = context;
  const spectrum = burstSpectrum(burst, noise && 'samples' in noise ? noise.samples : null, sampleRateHz);
  const highHz = Math.min(observableHighHz, sampleRateHz / 2);
  const share = ultrasonicShare(spectrum, Math.max(LOWEST_JUDGED_HZ, observableLowHz), highHz);
  return {
    peakFrequencyHz: peakFrequencyHz(spectrum, observableLowHz, highHz),
    centroidHz: centroidHz(spectrum, observableLowHz, highHz),
    ultrasonicShare: share,
    hearingClass: hearingClassOf(share),
  };
}

function ultrasonicShare(
  spectrum: ReturnType<typeof burstSpectrum>,
  lowHz: number,
  highHz: number,
): number | null {
  if (highHz < LEAST_ULTRASONIC_HIGH_HZ || !seesBelowHearingLine(lowHz)) return null;
  const energy = energyAboutHearingLine(spectrum, lowHz, highHz);
  return energy && energy.above / (energy.below + energy.above);
}

/** Below under a tenth of the energy, above over nine tenths, across between; unknown without a share. */
export function hearingClassOf(share: number | null): BurstParameters['hearingClass'] {
  if (share === null) return 'unknown';
  if (share < BELOW_SHARE) return 'below';
  return share > ABOVE_SHARE ? 'above' : 'across';
}

function noiseRmsOf(noise: BurstNoise | null): number {
  if (noise === null) return 0;
  if ('rmsFs' in noise) return noise.rmsFs;
  let squares = 0;
  for (const value of noise.samples) squares += value * value;
  return Math.sqrt(squares / Math.max(1, noise.samples.length));
}

function firstCrossing(samples: Float32Array, from: number, to: number, threshold: number): number {
  for (let n = from; n < to; n++) if (Math.abs(samples[n] ?? 0) >= threshold) return n;
  return to;
}

function lastCrossing(
  samples: Float32Array,
  first: number,
  to: number,
  threshold: number,
  gap: number,
): number {
  let last = first;
  for (let n = first; n < to && n - last <= gap; n++) if (Math.abs(samples[n] ?? 0) >= threshold) last = n;
  return last;
}

function clampIndex(index: number, length: number): number {
  return Math.max(0, Math.min(length, index));
}
