import { frameStart, framesIn, type FrameGrid } from './frame-plan.ts';
import type { Span } from './place-list.ts';

/** The newest samples of one channel: `samples[0]` is sample `startSample` of the recording. */
export interface SampleWindow {
  readonly samples: Float32Array;
  startSample: number;
  /** Exclusive. */
  endSample: number;
}

/** `from` and `to` are places in the window's samples. */
export type FrameVisitor = (index: number, samples: Float32Array, from: number, to: number) => void;

/** Walks the frames of a grid that belong to a segment as its samples arrive. */
export class FrameCursor {
  readonly #grid: FrameGrid;
  readonly #frames: number;
  readonly #end: number;
  #next: number;

  /** @param frames samples of the whole recording. */
  constructor(grid: FrameGrid, frames: number, segment: Span) {
    const { first, end } = framesIn(grid, segment);
    this.#grid = grid;
    this.#frames = frames;
    this.#end = end;
    this.#next = first;
  }

  /** Visits every frame not yet visited that lies whole in the window (or ends with the recording). */
  advance(window: SampleWindow, visit: FrameVisitor): void {
    const { size } = this.#grid;
    while (this.#next < this.#end) {
      const start = frameStart(this.#grid, this.#next, this.#frames);
      const end = Math.min(start + size, this.#frames);
      if (end > window.endSample) return;
      visit(this.#next, window.samples, start - window.startSample, end - window.startSample);
      this.#next++;
    }
  }
}
