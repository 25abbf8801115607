import type { DetectedCandidate } from '../../shared/contract/measurement.ts';
import { mergeOverChannels } from '../signal/candidate-merge.ts';

/** One burst reaches several sensors within this time: 10 cm of metal or ice, or 1 m of air at most. */
const MERGE_TOLERANCE_S = 0.0003;
/** A detector decides on a burst this much later at most, plus a block of its own. */
const DECISION_DELAY_S = 3;
const DETECTOR_BLOCK_SAMPLES = 65_536;

/** Joins the candidates of all channels as they are decided and hands them on in order of their onsets. */
export class CandidateStream {
  readonly #sampleRateHz: number;
  readonly #onCandidate: (candidate: DetectedCandidate) => void;
  readonly #waiting: DetectedCandidate[][];

  constructor(
    format: { sampleRateHz: number; channels: number },
    onCandidate: (candidate: DetectedCandidate) => void,
  ) {
    this.#sampleRateHz = format.sampleRateHz;
    this.#onCandidate = onCandidate;
    this.#waiting = Array.from({ length: format.channels }, () => []);
  }

  add(channel: number, candidates: DetectedCandidate[]): void {
    this.#waiting[channel]?.push(...candidates);
  }

  /** @param endSample up to where every channel has been read. */
  settle(endSample: number): void {
    this.#handOn(endSample - DECISION_DELAY_S * this.#sampleRateHz - DETECTOR_BLOCK_SAMPLES);
  }

  finish(): void {
    this.#handOn(Infinity);
  }

  #handOn(beforeSample: number): void {
    const latest = Math.max(
      ...this.#waiting
        .flat()
        .map((one) => one.onsetSample)
        .filter((at) => at < beforeSample),
    );
    if (latest === -Infinity) return;
    const tolerance = Math.round(MERGE_TOLERANCE_S * this.#sampleRateHz);
    // What another channel heard of the last burst goes with it.
    const isDue = (one: DetectedCandidate) => one.onsetSample <= latest + tolerance;
    const due = this.#waiting.map((list) => list.filter(isDue));
    for (const [channel, list] of this.#waiting.entries()) {
      this.#waiting[channel] = list.filter((one) => !isDue(one));
    }
    for (const candidate of mergeOverChannels(due, tolerance)) this.#onCandidate(candidate);
  }
}
