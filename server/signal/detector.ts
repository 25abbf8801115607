import type { DetectedCandidate } from '../../shared/contract/measurement.ts';
import { BurstFinder } from './burst-finder.ts';
import { defaultDetectorSettings, type DetectorSettings } from './detector-settings.ts';
import type { OctaveArithmetic } from './octave-arithmetic.ts';
import type { ChosenOnset } from './onset-choice.ts';
import { plainOctaves } from './plain-octaves.ts';
import { type CandidateContext, measureFoundBurst } from './found-burst.ts';

export interface DetectorOptions {
  readonly sampleRateHz: number;
  readonly channel: number;
  readonly settings?: Partial<DetectorSettings>;
  /** What does the arithmetic on every sample; plain TypeScript without. */
  readonly arithmetic?: OctaveArithmetic;
  readonly context: CandidateContext;
}

export interface Detector {
  /** Samples of the channel in order, in blocks of any size; copied. */
  push(samples: Float32Array): void;
  /** Candidates decided since the last call, by rising onset, so that they can be written while the stream runs. */
  take(): DetectedCandidate[];
  /** No candidate with an onset before this sample is still to come. */
  settledSample(): number;
  /** Candidates that noise alone may have given up to the settled sample, an upper bound. */
  expectedByChance(): number;
  /** All candidates not yet taken. Nothing may be pushed afterwards. */
  finish(): DetectedCandidate[];
}

/**
 * Finds bursts in one channel and measures each.
 *
 * Every octave from 1 kHz up is watched by itself: where its energy stands over the floor (see `OctaveTrigger`) onsets are
 * searched (see `findOnsets`), and where it may, a damped sine is looked for (see `DampedSineSearch`), which finds clicks that are weaker by
 * some 2 dB. Each burst is then measured in the band in which it was seen, widened by half an octave on either side, so that a click of
 * 80 kHz under a loud hum has the peak, the counts and the energy of the click.
 *
 * Steady noise gives at most `chanceRateHz` candidates per second; where bursts are frequent, weaker ones are believed as
 * long as no more than a share of all are chance (see `SureRate`).
 *
 * Memory does not grow with the stream, apart from the candidates not taken. The result is the same however the stream is
 * cut into blocks. Values that are not finite must be replaced beforehand.
 *
 * @throws RangeError for a rate that is not above 0.
 */
export function createDetector(options: DetectorOptions): Detector {
  const { sampleRateHz, channel, context } = options;
  if (!(sampleRateHz > 0)) throw new RangeError(`sampleRateHz: ${sampleRateHz} is not above 0`);
  const settings = { ...defaultDetectorSettings, ...options.settings };
  let ready: DetectedCandidate[] = [];
  const onBursts = (bursts: ChosenOnset[], groupEnd: number) => {
    for (const [index, onset] of bursts.entries()) {
      const nextSample = bursts[index + 1]?.sample ?? groupEnd;
      const { ring } = finder;
      ready.push(measureFoundBurst({ onset, nextSample, ring, sampleRateHz, channel, settings, context }));
    }
  };
  const finder = new BurstFinder({
    sampleRateHz,
    settings,
    arithmetic: options.arithmetic ?? plainOctaves,
    onBursts,
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
    expectedByChance: () => finder.expectedByChance,
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
