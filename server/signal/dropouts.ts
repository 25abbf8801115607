import type { SampleWindow } from './frame-cursor.ts';
import { PlaceList } from './place-list.ts';

const MINIMUM_S = 0.001;
const MINIMUM_SAMPLES = 16;
const LOOK_BACK_SAMPLES = 64;
/** Steps of the last bit by which the signal before a gap must vary: less is a quiet signal, not a cut one. */
const VARIED_STEPS = 16;

/**
 * Finds drop-outs: 1 ms or more of one repeated value (zero or held) that cuts into a signal which goes on afterwards.
 *
 * Repeats at full scale are clipping and not counted; nor is what a signal fades into, or silence at either end.
 */
export class DropoutTracker {
  readonly places = new PlaceList();
  readonly #minimumSamples: number;
  readonly #leastSpread: number;
  readonly #fullScale: number;
  #previous = Number.NaN;
  #runStart = 0;
  #cutsSignal = false;

  /** @param stepSize height of the last bit re full scale. @param fullScale magnitude that counts as clipped. */
  constructor(settings: { sampleRateHz: number; stepSize: number; fullScale: number }) {
    this.#minimumSamples = Math.max(MINIMUM_SAMPLES, Math.ceil(MINIMUM_S * settings.sampleRateHz));
    this.#leastSpread = VARIED_STEPS * settings.stepSize;
    this.#fullScale = settings.fullScale;
  }

  /** Samples the window must still hold from before its newest block. */
  get historySamples(): number {
    return this.#minimumSamples + LOOK_BACK_SAMPLES + 1;
  }

  /** @param from first sample of the window not yet seen. */
  push(window: SampleWindow, from: number): void {
    const end = window.endSample - window.startSample;
    if (this.#mayHoldRun(window.samples, from, end)) this.#follow(window, from, end);
    else this.#skip(window, from, end);
  }

  /** A run of the least length covers two neighbours of a comb half as wide: elsewhere nothing is to be found. */
  #mayHoldRun(samples: Float32Array, from: number, end: number): boolean {
    const comb = Math.floor(this.#minimumSamples / 2);
    const first = Math.max(0, from - this.#minimumSamples);
    for (let i = first + comb; i < end; i += comb) if (samples[i] === samples[i - comb]) return true;
    return false;
  }

  #skip({ samples, startSample }: SampleWindow, from: number, end: number): void {
    let runStart = end - 1;
    while (runStart > from && samples[runStart - 1] === samples[end - 1]) runStart--;
    const goesOn = runStart === from && samples[from] === this.#previous;
    if (!goesOn) this.#runStart = runStart + startSample;
    this.#previous = samples[end - 1]!;
    this.#cutsSignal = false;
  }

  #follow({ samples, startSample }: SampleWindow, from: number, end: number): void {
    const minimum = this.#minimumSamples;
    let previous = this.#previous;
    let runStart = this.#runStart - startSample;
    for (let i = from; i < end; i++) {
      const x = samples[i]!;
      if (x === previous) {
        if (i - runStart + 1 === minimum) this.#cutsSignal = this.#isCut(samples, runStart, x);
        continue;
      }
      if (i - runStart >= minimum && this.#cutsSignal) {
        this.places.add({ startSample: runStart + startSample, endSample: i + startSample });
      }
      this.#cutsSignal = false;
      previous = x;
      runStart = i;
    }
    this.#previous = previous;
    this.#runStart = runStart + startSample;
  }

  #isCut(samples: Float32Array, runStart: number, value: number): boolean {
    if (Math.abs(value) >= this.#fullScale || runStart < LOOK_BACK_SAMPLES) return false;
    let lowest = Infinity;
    let highest = -Infinity;
    for (let i = runStart - LOOK_BACK_SAMPLES; i < runStart; i++) {
      lowest = Math.min(lowest, samples[i]!);
      highest = Math.max(highest, samples[i]!);
    }
    return highest - lowest >= this.#leastSpread;
  }
}
