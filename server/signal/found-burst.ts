import type { DetectedCandidate } from '../../shared/contract/measurement.ts';
import { filterInPlace } from './biquad.ts';
import { measureBurst } from './bursts.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { countRises } from './energy-rises.ts';
import type { ChosenOnset } from './onset-choice.ts';
import { bandSections } from './onset-search.ts';
import type { SampleRing } from './sample-ring.ts';

/** What the measured parameters depend on besides the samples. */
export interface CandidateContext {
  readonly fullScaleV: number | null;
  readonly preampGainDb: number | null;
  readonly observableLowHz: number;
  readonly observableHighHz: number;
  /** Magnitude that counts as clipped. */
  readonly clippedFromFs?: number;
}

export interface FoundBurst {
  readonly onset: ChosenOnset;
  /** Where the next one begins, or what is held ends. */
  readonly nextSample: number;
  readonly ring: SampleRing;
  readonly sampleRateHz: number;
  readonly channel: number;
  readonly settings: DetectorSettings;
  readonly context: CandidateContext;
}

const NOISE_S = 0.004;
const MOST_NOISE_SAMPLES = 8192;
const NOISE_PERIODS = 8;
const BAND_MARGIN = 1.4;
const LOW_EDGE_PERIODS = 4;
const THRESHOLD_SIGMAS = 3;
const LEAST_THRESHOLD_OF_PEAK = 0.5;
const AFTER_S = 0.002;

/**
 * The parameters of a burst whose onset is known, in the band in which it was seen, widened by half an octave on either side. Noise and
 * threshold are of the same band right before the onset.
 */
export function measureFoundBurst(found: FoundBurst): DetectedCandidate {
  const { onset: burst, ring, sampleRateHz, channel, settings, context } = found;
  const lowHz = Math.max(settings.lowestHz, burst.seenLowHz) / BAND_MARGIN;
  const highHz = Math.min(sampleRateHz / 2, burst.seenHighHz * BAND_MARGIN);
  const least = Math.min(NOISE_S * sampleRateHz, MOST_NOISE_SAMPLES);
  const noiseCount = Math.ceil(Math.max(least, (NOISE_PERIODS / lowHz) * sampleRateHz));
  const settle = Math.ceil((LOW_EDGE_PERIODS / lowHz) * sampleRateHz);
  const last = Math.min(
    found.nextSample,
    Math.ceil(burst.endSample + AFTER_S * sampleRateHz),
    burst.sample + Math.ceil(settings.longestBurstS * sampleRateHz),
  );
  const held = ring.read(burst.sample - noiseCount - settle, Math.max(last, burst.sample + 2));
  const band = new Float64Array(held.samples);
  filterInPlace(band, bandSections(lowHz, highHz, sampleRateHz));
  const samples = new Float32Array(band);
  const onset = Math.min(burst.sample - held.firstSample, samples.length - 2);
  const noise = samples.subarray(Math.min(settle, Math.max(0, onset - 16)), Math.max(0, onset));
  const noisePower = meanSquare(noise);
  const result = measureBurst(samples, {
    ...context,
    sampleRateHz,
    firstSample: held.firstSample,
    onsetSample: held.firstSample + onset,
    thresholdFs: thresholdOf(samples, onset, noise.length > 0 ? Math.sqrt(noisePower) : null),
    noise: noise.length > 0 ? { samples: noise } : null,
    quietGapS: Math.max(settings.quietGapS, 3 / burst.lowHz),
    onsetUncertaintyUs: (burst.uncertaintySamples / sampleRateHz) * 1e6,
  });
  const end = result.endSample - held.firstSample;
  return {
    ...result,
    clipped: isClipped(held.samples, onset, end, context.clippedFromFs),
    rises: countRises(samples, { from: onset, to: end, sampleRateHz, lowHz: burst.lowHz, noisePower }),
    channel,
    channels: [channel],
    bandLowHz: lowHz,
    bandHighHz: highHz,
  };
}

/** Three times the noise, or half the peak where that is lower: a weak burst must have crossings to be measured by. */
function thresholdOf(samples: Float32Array, onset: number, sigma: number | null): number {
  let peak = 0;
  for (let n = onset; n < samples.length; n++) peak = Math.max(peak, Math.abs(samples[n]!));
  const wanted = sigma === null ? 0.1 * peak : THRESHOLD_SIGMAS * sigma;
  return Math.max(Number.MIN_VALUE, Math.min(wanted, LEAST_THRESHOLD_OF_PEAK * peak));
}

function meanSquare(samples: Float32Array): number {
  let squares = 0;
  for (let n = 0; n < samples.length; n++) squares += samples[n]! * samples[n]!;
  return squares / Math.max(1, samples.length);
}

/** Clipping is seen in the samples as recorded: behind a filter nothing stays at full scale. */
function isClipped(recorded: Float32Array, from: number, to: number, fromFs = 1 - 2 ** -15): boolean {
  for (let n = from; n < to; n++) if (Math.abs(recorded[n]!) >= fromFs) return true;
  return false;
}
