import type { DetectedCandidate } from '../../shared/contract/measurement.ts';
import { filterInPlace } from './biquad.ts';
import { BurstFinder, type FoundBurst } from './burst-finder.ts';
import { measureBurst } from './bursts.ts';
import { defaultDetectorSettings, type DetectorSettings } from './detector-settings.ts';
import { bandSections } from './onset-search.ts';

export interface DetectorOptions {
  readonly sampleRateHz: number;
  readonly channel: number;
  readonly settings?: Partial<DetectorSettings>;
  readonly context: {
    readonly fullScaleV: number | null;
    readonly preampGainDb: number | null;
    readonly observableLowHz: number;
    readonly observableHighHz: number;
    /** Magnitude that counts as clipped. */
    readonly clippedFromFs?: number;
  };
}

export interface Detector {
  /** Samples of the channel in order, in blocks of any size; copied. */
  push(samples: Float32Array): void;
  /** Candidates decided since the last call, by rising onset, so that they can be written while the stream runs. */
  take(): DetectedCandidate[];
  /** No candidate with an onset before this sample is still to come. */
  settledSample(): number;
  /** All candidates not yet taken. Nothing may be pushed afterwards. */
  finish(): DetectedCandidate[];
}

const NOISE_S = 0.004;
const BAND_MARGIN = 1.4;
const LOW_EDGE_PERIODS = 4;
const THRESHOLD_SIGMAS = 3;
const LEAST_THRESHOLD_OF_PEAK = 0.5;
const AFTER_S = 0.002;
const RING_OUT_S = 0.1;

/**
 * Finds bursts in one channel and measures each.
 *
 * Every octave from 1 kHz up is watched by itself (see `OctaveTrigger`); onsets are searched in the band that stood out
 * most (see `findOnsets`); each burst is then measured in the band in which it was seen, widened by half an octave on
 * either side, so that a click of 80 kHz under a loud hum has the peak, the counts and the energy of the click.
 *
 * Memory does not grow with the stream, apart from the candidates not taken. The result is the same however the stream is
 * cut into blocks. Values that are not finite must be replaced beforehand.
 *
 * @throws RangeError for a rate that is not above 0.
 */
export function createDetector(options: DetectorOptions): Detector {
  const { sampleRateHz } = options;
  if (!(sampleRateHz > 0)) throw new RangeError(`sampleRateHz: ${sampleRateHz} is not above 0`);
  const settings = { ...defaultDetectorSettings, ...options.settings };
  let ready: DetectedCandidate[] = [];
  const finder = new BurstFinder(sampleRateHz, settings, (bursts, nextSample) => {
    for (const [index, burst] of bursts.entries()) {
      const next = bursts[index + 1]?.sample ?? nextSample;
      ready.push(measure(burst, { options, finder, settings, next }));
    }
  });
  const take = () => {
    const taken = ready;
    ready = [];
    return taken;
  };
  return {
    push: (samples) => finder.push(samples),
    take,
    settledSample: () => finder.settledSample,
    finish: () => {
      finder.finish();
      return take();
    },
  };
}

/** Candidates that steady noise alone may give in a stretch, an upper bound: rate of chance times duration. */
export function expectedByChance(
  seconds: number,
  settings: DetectorSettings = defaultDetectorSettings,
): number {
  return settings.chanceRateHz * seconds;
}

interface Measuring {
  readonly options: DetectorOptions;
  readonly finder: BurstFinder;
  readonly settings: DetectorSettings;
  readonly next: number;
}

function measure(burst: FoundBurst, { options, finder, settings, next }: Measuring): DetectedCandidate {
  const { sampleRateHz, channel, context } = options;
  const lowHz = Math.max(settings.lowestHz / BAND_MARGIN, burst.seenLowHz / BAND_MARGIN);
  const highHz = Math.min(sampleRateHz / 2, burst.seenHighHz * BAND_MARGIN);
  const noiseCount = Math.ceil(Math.max(NOISE_S, 8 / lowHz) * sampleRateHz);
  const settle = Math.ceil((LOW_EDGE_PERIODS / lowHz) * sampleRateHz);
  const last = Math.min(
    next,
    Math.ceil(burst.endSample + AFTER_S * sampleRateHz),
    burst.sample + Math.ceil(RING_OUT_S * sampleRateHz),
  );
  const held = finder.ring.read(burst.sample - noiseCount - settle, Math.max(last, burst.sample + 2));
  const band = Float64Array.from(held.samples);
  filterInPlace(band, bandSections(lowHz, highHz, sampleRateHz));
  const samples = Float32Array.from(band);
  const onset = Math.min(burst.sample - held.firstSample, samples.length - 2);
  const noise = samples.slice(Math.min(settle, Math.max(0, onset - 16)), Math.max(0, onset));
  const result = measureBurst(samples, {
    ...context,
    sampleRateHz,
    firstSample: held.firstSample,
    onsetSample: held.firstSample + onset,
    thresholdFs: thresholdOf(samples, onset, noise),
    noise: noise.length > 0 ? { samples: noise } : null,
    quietGapS: Math.max(settings.quietGapS, 3 / burst.lowHz),
    onsetUncertaintyUs: (burst.uncertaintySamples / sampleRateHz) * 1e6,
  });
  const clipped = isClipped(
    held.samples.subarray(onset, result.endSample - held.firstSample),
    context.clippedFromFs,
  );
  return { ...result, clipped, channel, channels: [channel], bandLowHz: lowHz, bandHighHz: highHz };
}

/** Three times the noise, or half the peak where that is lower: a weak burst must have crossings to be measured by. */
function thresholdOf(samples: Float32Array, onset: number, noise: Float32Array): number {
  let squares = 0;
  for (const value of noise) squares += value * value;
  let peak = 0;
  for (let n = onset; n < samples.length; n++) peak = Math.max(peak, Math.abs(samples[n] ?? 0));
  const sigma = Math.sqrt(squares / Math.max(1, noise.length));
  const wanted = noise.length > 0 ? THRESHOLD_SIGMAS * sigma : 0.1 * peak;
  return Math.max(Number.MIN_VALUE, Math.min(wanted, LEAST_THRESHOLD_OF_PEAK * peak));
}

/** Clipping is seen in the samples as recorded: behind a filter nothing stays at full scale. */
function isClipped(recorded: Float32Array, fromFs = 1 - 2 ** -15): boolean {
  return recorded.some((value) => Math.abs(value) >= fromFs);
}
