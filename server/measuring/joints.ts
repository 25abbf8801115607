import { durationText } from '../../shared/audio/unit-text.ts';
import type { DetectedCandidate, QualityFinding } from '../../shared/contract/measurement.ts';
import { defaultDetectorSettings } from '../signal/detector-settings.ts';
import { counted, finding } from '../signal/quality-finding.ts';

/** Onsets nearer to each other than this are one to the detector, so that the end of a piece and a burst before it are, too. */
const RESOLUTION_S = defaultDetectorSettings.shortestSeparationS;
/** A jump is placed a little early, or late by no more than this or than three times the uncertainty of its onset. */
const LEAST_BEHIND_S = 0.00005;
const SPREADS = 3;

type Onset = Pick<DetectedCandidate, 'onsetSample' | 'onsetUncertaintyUs'>;

/** Where pieces of a recording meet that were not taken one right after the other: the signal may jump there without a sound. */
export class Joints {
  readonly #firstSamples: readonly number[];
  readonly #sampleRateHz: number;

  /**
   * @param firstSamples of every piece but the first, rising.
   * @param sampleRateHz true rate, above 0.
   */
  constructor(firstSamples: readonly number[], sampleRateHz: number) {
    this.#firstSamples = firstSamples;
    this.#sampleRateHz = sampleRateHz;
  }

  /** Whether samples of two pieces lie in `[startSample, endSample)`. */
  isWithin(startSample: number, endSample: number): boolean {
    return this.#next(startSample) < endSample;
  }

  /**
   * Whether an onset cannot be told from a jump: it lies less than what the detector can tell apart before a joint, or behind it
   * by less than three times its own uncertainty, at least 0.05 ms and at most the same time as before.
   */
  hides({ onsetSample, onsetUncertaintyUs }: Onset): boolean {
    const rateHz = this.#sampleRateHz;
    if (this.#next(onsetSample) - onsetSample <= Math.round(RESOLUTION_S * rateHz)) return true;
    const spreadS = onsetUncertaintyUs === null ? Infinity : (SPREADS * onsetUncertaintyUs) / 1e6;
    const behindS = Math.min(RESOLUTION_S, Math.max(LEAST_BEHIND_S, spreadS));
    return onsetSample - this.#last(onsetSample) <= Math.round(behindS * rateHz);
  }

  /** What a person should know of the joints; nothing where there are none. */
  findings(leftOut: number): QualityFinding[] {
    const count = this.#firstSamples.length;
    if (count === 0) return [];
    const [most, least] = [RESOLUTION_S, LEAST_BEHIND_S].map(durationText);
    const pieces = `The recording has ${counted(count, 'joint', 'joints')} where pieces meet that were taken at different times.`;
    const rule = `Around each, bursts were not searched in the ${most} before it and, as far as an onset cannot be told from a jump, ${least} to ${most} behind it: ${counted(leftOut, 'candidate was', 'candidates were')} left out.`;
    const limit = 'Where the noise is louder behind a joint than before it, candidates there can be noise.';
    return [finding('joints', 'note', `${pieces} ${rule} ${limit}`, count)];
  }

  /** The first joint behind a sample. */
  #next(sample: number): number {
    return this.#firstSamples[this.#countUpTo(sample)] ?? Infinity;
  }

  /** The last joint at or before a sample. */
  #last(sample: number): number {
    return this.#firstSamples[this.#countUpTo(sample) - 1] ?? -Infinity;
  }

  #countUpTo(sample: number): number {
    let low = 0;
    let high = this.#firstSamples.length;
    while (low < high) {
      const middle = (low + high) >>> 1;
      if (this.#firstSamples[middle]! <= sample) low = middle + 1;
      else high = middle;
    }
    return low;
  }
}
