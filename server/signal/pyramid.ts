import { CELL_SAMPLES, type SampleCell } from './sample-cells.ts';

/** Samples per point of the lowest level of a peak pyramid, and points of one level per point of the next. */
export const PYRAMID_BASE = CELL_SAMPLES;
export const PYRAMID_FACTOR = 4;

/** Points of every level, from 256 samples per point to the first level of a single point. */
export function pyramidLevels(frames: number): number[] {
  const levels = [Math.ceil(frames / PYRAMID_BASE)];
  while (levels.at(-1)! > 1) levels.push(Math.ceil(levels.at(-1)! / PYRAMID_FACTOR));
  return levels;
}

/** Samples per point of a level. */
export function pyramidCell(level: number): number {
  return PYRAMID_BASE * PYRAMID_FACTOR ** level;
}

/** Takes the points of a level in order. */
export type PeakSink = (level: number, minimum: number, maximum: number) => void;

/** Levels whose points lie whole in segments of so many samples. */
export function pyramidLevelsWithin(frames: number, segmentSamples: number): number[] {
  return pyramidLevels(frames).filter((_, level) => pyramidCell(level) <= segmentSamples);
}

/**
 * Least and greatest sample of every 256, 1024, 4096 ... samples of one segment of a channel, exact, in order of time.
 */
export class PeakPyramid {
  readonly #sink: PeakSink;
  readonly #levels: number;
  /** Of the open point of each level. */
  readonly #minima: Float64Array;
  readonly #maxima: Float64Array;
  readonly #parts: Uint8Array;
  #minimum = Infinity;
  #maximum = -Infinity;
  #count = 0;

  /** @param levels how many; each point of the highest lies in the segment. */
  constructor(levels: number, sink: PeakSink) {
    this.#sink = sink;
    this.#levels = levels;
    this.#minima = new Float64Array(levels).fill(Infinity);
    this.#maxima = new Float64Array(levels).fill(-Infinity);
    this.#parts = new Uint8Array(levels);
  }

  push(cell: SampleCell): void {
    this.#minimum = Math.min(this.#minimum, cell.minimum);
    this.#maximum = Math.max(this.#maximum, cell.maximum);
    this.#count += cell.count;
    if (this.#count === PYRAMID_BASE) this.#closeBase();
  }

  /** Closes the last, shorter points. */
  finish(): void {
    if (this.#count > 0) this.#closeBase();
    for (let level = 1; level < this.#levels; level++) {
      if (this.#parts[level]! > 0) this.#emit(level, this.#minima[level]!, this.#maxima[level]!);
    }
  }

  #closeBase(): void {
    this.#emit(0, this.#minimum, this.#maximum);
    this.#minimum = Infinity;
    this.#maximum = -Infinity;
    this.#count = 0;
  }

  #emit(level: number, minimum: number, maximum: number): void {
    this.#sink(level, minimum, maximum);
    this.#minima[level] = Infinity;
    this.#maxima[level] = -Infinity;
    this.#parts[level] = 0;
    const above = level + 1;
    if (above === this.#levels) return;
    const least = (this.#minima[above] = Math.min(this.#minima[above]!, minimum));
    const most = (this.#maxima[above] = Math.max(this.#maxima[above]!, maximum));
    if (++this.#parts[above]! === PYRAMID_FACTOR) this.#emit(above, least, most);
  }
}
