import type { SampleWindow } from './frame-cursor.ts';
import { PlaceList, type Span } from './place-list.ts';

const MINIMUM_S = 0.001;
const MINIMUM_SAMPLES = 16;
const LOOK_BACK_SAMPLES = 64;
/** Steps of the last bit by which the signal before a gap must vary: less is a quiet signal, not a cut one. */
const VARIED_STEPS = 16;

/** What one segment says of drop-outs. */
export interface DropoutPart {
  places: Span[];
  count: number;
  /** End of the run that came over from the segment before; `null` when it fills this segment whole. */
  carriedEndSample: number | null;
  /** The run that this segment ends with, and whether it cuts into a signal; `null` when it came over from before. */
  tail: { startSample: number; cutsSignal: boolean } | null;
}

/**
 * Finds drop-outs: 1 ms or more of one repeated value (zero or held) that cuts into a signal which goes on afterwards.
 *
 * Repeats at full scale are clipping and not counted; nor is what a signal fades into, or silence at either end.
 */
export class DropoutTracker {
  readonly #places = new PlaceList();
  readonly #minimumSamples: number;
  readonly #leastSpread: number;
  readonly #fullScale: number;
  #previous = Number.NaN;
  #runStart = 0;
  #cutsSignal = false;
  #isCarried = true;
  #carriedEndSample: number | null = null;

  /** @param stepSize height of the last bit re full scale. @param fullScale magnitude that counts as clipped. */
  constructor(settings: { sampleRateHz: number; stepSize: number; fullScale: number }) {
    this.#minimumSamples = leastSamples(settings.sampleRateHz);
    this.#leastSpread = VARIED_STEPS * settings.stepSize;
    this.#fullScale = settings.fullScale;
  }

  /** Samples the window must still hold from before its newest block. */
  get historySamples(): number {
    return this.#minimumSamples + LOOK_BACK_SAMPLES + 1;
  }

  /** @param from first place in the window not yet seen. @param end exclusive. */
  push(window: SampleWindow, from: number, end: number): void {
    if (Number.isNaN(this.#previous)) this.#begin(window, from);
    if (this.#mayHoldRun(window.samples, from, end)) this.#follow(window, from, end);
    else this.#skip(window, from, end);
  }

  finish(window: SampleWindow, end: number): DropoutPart {
    const { spans: places, count } = this.#places;
    const carriedEndSample = this.#carriedEndSample;
    if (this.#isCarried) return { places, count, carriedEndSample: null, tail: null };
    const runStart = this.#runStart - window.startSample;
    const cutsSignal = runStart >= 0 && this.#isCut(window.samples, runStart, window.samples[end - 1]!);
    const tail = { startSample: this.#runStart, cutsSignal: cutsSignal || this.#cutsSignal };
    return { places, count, carriedEndSample, tail };
  }

  /** The run that the samples before the segment end with is followed until it ends here. */
  #begin({ samples, startSample }: SampleWindow, from: number): void {
    this.#previous = samples[from]!;
    this.#runStart = from + startSample;
    this.#isCarried = from > 0 && samples[from - 1] === samples[from];
    if (!this.#isCarried) this.#carriedEndSample = this.#runStart;
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
    if (!goesOn) {
      if (this.#isCarried) this.#endCarried(this.#endOfRun(samples, from, end) + startSample);
      this.#runStart = runStart + startSample;
    }
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
      if (this.#isCarried) this.#endCarried(i + startSample);
      else if (i - runStart >= minimum && this.#cutsSignal) {
        this.#places.add({ startSample: runStart + startSample, endSample: i + startSample });
      }
      this.#cutsSignal = false;
      previous = x;
      runStart = i;
    }
    this.#previous = previous;
    this.#runStart = runStart + startSample;
  }

  #endCarried(endSample: number): void {
    this.#isCarried = false;
    this.#carriedEndSample = endSample;
  }

  /** Where the run that goes on at `from` ends. */
  #endOfRun(samples: Float32Array, from: number, end: number): number {
    let i = from;
    while (i < end && samples[i] === this.#previous) i++;
    return i;
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

/** The drop-outs of a whole channel. @param parts of all segments in order. */
export function joinDropouts(parts: readonly DropoutPart[], sampleRateHz: number): PlaceList {
  const places = new PlaceList();
  let open: DropoutPart['tail'] = null;
  for (const part of parts) {
    if (part.carriedEndSample === null) continue;
    const { carriedEndSample: endSample } = part;
    if (open?.cutsSignal && endSample - open.startSample >= leastSamples(sampleRateHz)) {
      places.add({ startSample: open.startSample, endSample });
    }
    for (const span of part.places) places.add(span);
    places.count += part.count - part.places.length;
    open = part.tail;
  }
  return places;
}

function leastSamples(sampleRateHz: number): number {
  return Math.max(MINIMUM_SAMPLES, Math.ceil(MINIMUM_S * sampleRateHz));
}
