import { onsetCriterion } from './onset.ts';
import { requireWindows, type StaLtaWindows } from './sta-lta.ts';

export interface StaLtaTrigger extends StaLtaWindows {
  /** Ratio above which an event begins, and below which it ends. */
  readonly on: number;
  readonly off: number;
  /** The onset is picked from this long before the trigger up to so long after it, exclusive. */
  readonly pickBeforeSamples: number;
  readonly pickAfterSamples: number;
}

/** Places in the stream. */
export interface StaLtaEvent {
  /** First sample whose ratio is above `on`. */
  readonly triggerSample: number;
  /** First sample after it whose ratio is below `off`, or the end of the stream. */
  readonly endSample: number;
  /** Minimum of Akaike's criterion in the window about the trigger. */
  readonly onsetSample: number;
}

/** The settings at which Allen's trigger is compared here: 0.5 ms over 20 ms, on at 5, off at 1.5, picked from -4 to +2 ms. */
export function usualTrigger(sampleRateHz: number): StaLtaTrigger {
  const samplesIn = (seconds: number) => Math.round(seconds * sampleRateHz);
  return {
    shortSamples: samplesIn(0.0005),
    longSamples: samplesIn(0.02),
    on: 5,
    off: 1.5,
    pickBeforeSamples: samplesIn(0.004),
    pickAfterSamples: samplesIn(0.002),
  };
}

/** The sums are added up anew this often, so that rounding does not gather. */
const BLOCK_SAMPLES = 65_536;

/**
 * Finds events in a stream by the ratio of a short over a long mean of the squared samples (see `classicStaLta`) and picks the onset of each
 * by Akaike's criterion on the samples about its trigger (see `onsetCriterion`).
 *
 * Picks wait in a queue of their own until the samples after the trigger have come, whether the event is over by then or not. The
 * events do not depend on how the stream is cut. Memory: 64 Ki samples, the long window and the pick's.
 *
 * @throws RangeError unless 1 <= shortSamples < longSamples. NaN ends all events. Cost: about 3 nanoseconds per sample.
 * Source: R. V. Allen, BSSA 68 (1978) 1521; N. Maeda, Zisin 38 (1985) 365.
 */
export class StaLtaEvents {
  readonly #trigger: StaLtaTrigger;
  readonly #past: number;
  readonly #values: Float32Array;
  readonly #waiting: { triggerSample: number; endSample: number | null; onsetSample: number | null }[] = [];
  /** Sample of the stream that stands at place 0 of `values`; zeros stand before the stream. */
  #first: number;
  #inBlock = 0;
  #isActive = false;

  constructor(trigger: StaLtaTrigger) {
    requireWindows(trigger);
    this.#trigger = trigger;
    const pick = trigger.pickBeforeSamples + trigger.pickAfterSamples;
    this.#past = Math.max(trigger.longSamples, pick) + 1;
    this.#values = new Float32Array(this.#past + BLOCK_SAMPLES);
    this.#first = -this.#past;
  }

  push(samples: Float32Array): void {
    for (let from = 0; from < samples.length;) {
      const count = Math.min(samples.length - from, BLOCK_SAMPLES - this.#inBlock);
      this.#values.set(samples.subarray(from, from + count), this.#past + this.#inBlock);
      this.#inBlock += count;
      from += count;
      if (this.#inBlock === BLOCK_SAMPLES) this.#process();
    }
  }

  /** Events that are over and picked, in order. */
  take(): StaLtaEvent[] {
    const taken: StaLtaEvent[] = [];
    for (let [next] = this.#waiting; next; [next] = this.#waiting) {
      const { triggerSample, endSample, onsetSample } = next;
      if (endSample === null || onsetSample === null) break;
      taken.push({ triggerSample, endSample, onsetSample });
      this.#waiting.shift();
    }
    return taken;
  }

  /** The rest; an event that is not over ends with the stream. */
  finish(): StaLtaEvent[] {
    const endSample = this.#first + this.#past + this.#inBlock;
    this.#process();
    for (const event of this.#waiting) {
      event.endSample ??= endSample;
      event.onsetSample ??= this.#pick(event.triggerSample, endSample);
    }
    return this.take();
  }

  #process(): void {
    const end = this.#first + this.#past + this.#inBlock;
    this.#scan(this.#past, this.#past + this.#inBlock);
    for (const event of this.#waiting) {
      const isHeld = event.triggerSample + this.#trigger.pickAfterSamples <= end;
      if (event.onsetSample === null && isHeld) event.onsetSample = this.#pick(event.triggerSample, end);
    }
    this.#values.copyWithin(0, this.#inBlock, this.#inBlock + this.#past);
    this.#first += this.#inBlock;
    this.#inBlock = 0;
  }

  /** Goes through the places [from, to) of `values`. */
  #scan(from: number, to: number): void {
    const values = this.#values;
    const { shortSamples, longSamples, on, off } = this.#trigger;
    const onSums = (on * shortSamples) / longSamples;
    const offSums = (off * shortSamples) / longSamples;
    // Before the long window is full there is no ratio: nothing triggers.
    const full = Math.max(from, longSamples - 1 - this.#first);
    let short = sumOfSquares(values, from - shortSamples, from);
    let long = sumOfSquares(values, from - longSamples, from);
    let at = from;
    while (at < to) {
      const isActive = this.#isActive;
      // Of one sign, both comparisons are one: the sums cross the line upwards outside of an event, downwards inside.
      const sign = isActive ? -1 : 1;
      const line = sign * (isActive ? offSums : onSums);
      const least = isActive ? from : full;
      let hasTurned = false;
      for (; at < to && !hasTurned; at++) {
        const value = values[at]!;
        const shortGone = values[at - shortSamples]!;
        const longGone = values[at - longSamples]!;
        const energy = value * value;
        short += energy - shortGone * shortGone;
        long += energy - longGone * longGone;
        hasTurned = sign * short > line * long && at >= least;
      }
      if (!hasTurned) return;
      this.#isActive = !isActive;
      this.#turn(this.#first + at - 1, this.#isActive);
    }
  }

  #turn(sample: number, isOn: boolean): void {
    if (isOn) this.#waiting.push({ triggerSample: sample, endSample: null, onsetSample: null });
    else this.#waiting.at(-1)!.endSample = sample;
  }

  #pick(triggerSample: number, endSample: number): number {
    const { pickBeforeSamples, pickAfterSamples } = this.#trigger;
    const start = Math.max(0, triggerSample - pickBeforeSamples);
    const end = Math.min(endSample, triggerSample + pickAfterSamples);
    const curve = onsetCriterion(this.#values.subarray(start - this.#first, end - this.#first));
    let least = 0;
    for (let k = 1; k < curve.length; k++) if (curve[k]! < curve[least]!) least = k;
    return start + least;
  }
}

/** All events of a recording that is in memory. */
export function staLtaEvents(samples: Float32Array, trigger: StaLtaTrigger): StaLtaEvent[] {
  const events = new StaLtaEvents(trigger);
  events.push(samples);
  return [...events.take(), ...events.finish()];
}

function sumOfSquares(values: Float32Array, from: number, to: number): number {
  let sum = 0;
  for (let at = from; at < to; at++) sum += values[at]! * values[at]!;
  return sum;
}
