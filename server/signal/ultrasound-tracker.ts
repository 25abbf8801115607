import type { FlaggedSpan } from '../../shared/contract/measurement.ts';
import { sumOf } from './frame-spectrum.ts';
import { RunningFloor } from './noise-floor.ts';

export interface UltrasoundTrackerOptions {
  readonly sampleRateHz: number;
  readonly channel: number;
  /** Samples per short frame and from one to the next. */
  readonly frameSize: number;
  readonly hop: number;
  /** Samples of the recording; frames end there. */
  readonly frames: number;
  readonly band: { readonly lowHz: number; readonly highHz: number };
}

/** A short frame's power per line: `power[offset + k - first]` at k fs / N, k from `first` up to `end`. */
export interface ShortFramePower {
  readonly index: number;
  readonly power: Float32Array;
  readonly offset: number;
  readonly first: number;
  readonly end: number;
}

export interface UltrasoundTracker {
  /** Frames in order; some may be missing. */
  push(frame: ShortFramePower): void;
  finish(): SpanPart;
}

/** Spans of a segment by start (of more than 1,000 the strongest), and how many there were. */
export interface SpanPart {
  spans: FlaggedSpan[];
  spanCount: number;
}

export const LEAST_EXCESS_DB = 6;
const MOST_SPANS = 1000;
const BLOCK_FRAMES = 8;
const FLOOR_BLOCKS = 256;
const LEARNING_FRAMES = 512;
const JOIN_FRAMES = 2;
const FROZEN_S = 10;
const SMALLEST_FLOOR = 1e-18;

/**
 * Spans of short frames whose energy in the observable band stands at least 6 dB over the floor of quiet frames.
 *
 * The floor is the median of block means of the last quiet frames; flagged frames do not move it for 10 seconds, after which
 * what lasts becomes the new floor. Frame k stands for the samples [k hop, (k + 1) hop). Memory does not grow with the
 * recording.
 */
export function createUltrasoundTracker(options: UltrasoundTrackerOptions): UltrasoundTracker {
  return new BandTracker(options);
}

/** The spans of a whole channel: what ends one segment and begins the next is one span. @param hop of the frames. */
export function joinSpans(parts: readonly SpanPart[], hop: number): SpanPart {
  const joined: FlaggedSpan[] = [];
  let spanCount = 0;
  for (const part of parts) {
    spanCount += part.spanCount;
    for (const span of part.spans) {
      const before = joined.at(-1);
      if (before && span.startSample - before.endSample < JOIN_FRAMES * hop) {
        before.endSample = span.endSample;
        before.excessDb = Math.max(before.excessDb, span.excessDb);
        spanCount -= 1;
      } else joined.push({ ...span });
    }
  }
  return { spans: strongest(joined).sort((a, b) => a.startSample - b.startSample), spanCount };
}

/** Of more than 1,000 the strongest. */
function strongest(spans: FlaggedSpan[]): FlaggedSpan[] {
  if (spans.length <= MOST_SPANS) return spans;
  return spans.sort((a, b) => b.excessDb - a.excessDb || a.startSample - b.startSample).slice(0, MOST_SPANS);
}

class BandTracker implements UltrasoundTracker {
  readonly #options: UltrasoundTrackerOptions;
  readonly #firstBin: number;
  readonly #endBin: number;
  readonly #floor = new RunningFloor(FLOOR_BLOCKS, Number.MAX_SAFE_INTEGER);
  readonly #spans: SpanCollector;
  #learning: { index: number; energy: number }[] | null = [];
  #level = SMALLEST_FLOOR;
  #blockSum = 0;
  #blockCount = 0;
  #flaggedRun = 0;
  #sinceUpdate = 0;

  constructor(options: UltrasoundTrackerOptions) {
    const binHz = options.sampleRateHz / options.frameSize;
    this.#options = options;
    this.#firstBin = Math.ceil(options.band.lowHz / binHz - 1e-9);
    this.#endBin = Math.floor(options.band.highHz / binHz + 1e-9) + 1;
    this.#spans = new SpanCollector(options);
  }

  push(frame: ShortFramePower): void {
    const { power, offset, first } = frame;
    const from = offset + Math.max(this.#firstBin, first) - first;
    const energy = sumOf(power, from, Math.max(from, offset + Math.min(this.#endBin, frame.end) - first));
    if (!this.#learning) {
      this.#judge(frame.index, energy);
      return;
    }
    this.#learning.push({ index: frame.index, energy });
    if (this.#learning.length === LEARNING_FRAMES) this.#learn();
  }

  finish(): SpanPart {
    this.#learn();
    return this.#spans.finish();
  }

  #learn(): void {
    const learned = this.#learning;
    this.#learning = null;
    if (!learned || learned.length === 0) return;
    const energies = learned.map(({ energy }) => energy);
    const perBlock = energies.length >= 4 * BLOCK_FRAMES ? BLOCK_FRAMES : 1;
    const start = new RunningFloor(Math.ceil(energies.length / perBlock), Number.MAX_SAFE_INTEGER);
    for (let at = 0; at + perBlock <= energies.length; at += perBlock) {
      start.push(energies.slice(at, at + perBlock).reduce((sum, energy) => sum + energy / perBlock, 0));
    }
    this.#level = Math.max(SMALLEST_FLOOR, start.read().level);
    for (const { index, energy } of learned) this.#judge(index, energy);
  }

  #judge(index: number, energy: number): void {
    const excessDb = 10 * Math.log10(Math.max(energy, SMALLEST_FLOOR) / this.#level);
    const flagged = excessDb >= LEAST_EXCESS_DB;
    this.#flaggedRun = flagged ? this.#flaggedRun + 1 : 0;
    if (flagged) this.#spans.add(index, excessDb);
    const frozen = flagged && (this.#flaggedRun * this.#options.hop) / this.#options.sampleRateHz < FROZEN_S;
    if (!frozen) this.#follow(energy);
  }

  #follow(energy: number): void {
    this.#blockSum += energy;
    this.#blockCount += 1;
    if (this.#blockCount < BLOCK_FRAMES) return;
    this.#floor.push(this.#blockSum / BLOCK_FRAMES);
    this.#blockSum = 0;
    this.#blockCount = 0;
    this.#sinceUpdate += 1;
    if (this.#floor.blocks < LEARNING_FRAMES / BLOCK_FRAMES || this.#sinceUpdate < BLOCK_FRAMES) return;
    this.#sinceUpdate = 0;
    this.#level = Math.max(SMALLEST_FLOOR, this.#floor.read().level);
  }
}

/** Joins flagged frames to spans and keeps the strongest. */
class SpanCollector {
  readonly #options: UltrasoundTrackerOptions;
  #open: { first: number; last: number; excessDb: number } | null = null;
  #spans: FlaggedSpan[] = [];
  #count = 0;

  constructor(options: UltrasoundTrackerOptions) {
    this.#options = options;
  }

  add(index: number, excessDb: number): void {
    const open = this.#open;
    if (open && index - open.last <= JOIN_FRAMES) {
      open.last = index;
      open.excessDb = Math.max(open.excessDb, excessDb);
      return;
    }
    this.#close();
    this.#open = { first: index, last: index, excessDb };
  }

  finish(): SpanPart {
    this.#close();
    const spans = strongest(this.#spans).sort((a, b) => a.startSample - b.startSample);
    return { spans, spanCount: this.#count };
  }

  #close(): void {
    if (!this.#open) return;
    const { channel, hop, frames } = this.#options;
    const { first, last, excessDb } = this.#open;
    this.#open = null;
    this.#count += 1;
    const endSample = Math.min(frames, (last + 1) * hop);
    this.#spans.push({ channel, startSample: first * hop, endSample, excessDb });
    if (this.#spans.length >= 2 * MOST_SPANS) this.#spans = strongest(this.#spans);
  }
}
