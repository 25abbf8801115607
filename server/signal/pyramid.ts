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

interface OpenPoint {
  minimum: number;
  maximum: number;
  parts: number;
}

/** Levels whose points lie whole in segments of so many samples. */
export function pyramidLevelsWithin(frames: number, segmentSamples: number): number[] {
  return pyramidLevels(frames).filter((_, level) => pyramidCell(level) <= segmentSamples);
}

/**
 * Least and greatest sample of every 256, 1024, 4096 ... samples of one segment of a channel, exact, in order of time.
 */
export class PeakPyramid {
  readonly #sink: PeakSink;
  readonly #open: OpenPoint[];
  #minimum = Infinity;
  #maximum = -Infinity;
  #count = 0;

  /** @param levels how many; each point of the highest lies in the segment. */
  constructor(levels: number, sink: PeakSink) {
    this.#sink = sink;
    this.#open = Array.from({ length: levels }, () => emptyPoint());
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
    for (let level = 1; level < this.#open.length; level++) {
      if (this.#open[level]!.parts > 0) this.#emit(level);
    }
  }

  #closeBase(): void {
    this.#open[0] = { minimum: this.#minimum, maximum: this.#maximum, parts: 1 };
    this.#minimum = Infinity;
    this.#maximum = -Infinity;
    this.#count = 0;
    this.#emit(0);
  }

  #emit(level: number): void {
    const point = this.#open[level]!;
    this.#sink(level, point.minimum, point.maximum);
    this.#open[level] = emptyPoint();
    const above = this.#open[level + 1];
    if (!above) return;
    above.minimum = Math.min(above.minimum, point.minimum);
    above.maximum = Math.max(above.maximum, point.maximum);
    above.parts++;
    if (above.parts === PYRAMID_FACTOR) this.#emit(level + 1);
  }
}

function emptyPoint(): OpenPoint {
  return { minimum: Infinity, maximum: -Infinity, parts: 0 };
}
