import { frameStart, framesIn, type FrameGrid } from './frame-plan.ts';
import type { Span } from './place-list.ts';

/** The newest samples of one channel: `samples[0]` is sample `startSample` of the recording. */
export interface SampleWindow {
  readonly samples: Float32Array;
  startSample: number;
  /** Exclusive. */
  endSample: number;
}

/** Frames `[first, end)`. */
export interface FrameRun {
  first: number;
  end: number;
}

/** Hands out the frames of a grid that belong to a segment, many at a time, as its samples arrive. */
export class FrameCursor {
  readonly #grid: FrameGrid;
  readonly #frames: number;
  readonly #end: number;
  readonly #most: number;
  readonly #together: number;
  #next: number;

  /**
   * @param frames samples of the whole recording.
   * @param most frames of one run. @param together all runs but the last are multiples of it, and so is `most`.
   */
  constructor(grid: FrameGrid, frames: number, segment: Span, most: number, together: number) {
    const { first, end } = framesIn(grid, segment);
    this.#grid = grid;
    this.#frames = frames;
    this.#end = end;
    this.#most = most;
    this.#together = together;
    this.#next = first;
  }

  /** The next frames that lie whole in the window (or end with the recording); `undefined` when it takes more samples. */
  take({ endSample }: SampleWindow): FrameRun | undefined {
    const first = this.#next;
    let end = first;
    const last = Math.min(this.#end, first + this.#most);
    while (end < last && frameStart(this.#grid, end, this.#frames) + this.samplesOf(end) <= endSample) end++;
    if (end < this.#end) end -= (end - first) % this.#together;
    if (end === first) return undefined;
    this.#next = end;
    return { first, end };
  }

  /** Samples that a frame holds: the size of the grid, or fewer where the recording is shorter. */
  samplesOf(index: number): number {
    return Math.min(this.#grid.size, this.#frames - frameStart(this.#grid, index, this.#frames));
  }
}
