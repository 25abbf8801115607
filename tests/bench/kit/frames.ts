import type { Page } from 'playwright-core';
import type { BenchRow } from './bench.ts';
import { short } from './figures.ts';
import { spreadOf } from './ratios.ts';

const SLOW_FRAME_MS = 25;

// Text, since all of it is known in the page alone.
const watchFrames = `(() => {
  const frames = [];
  let last = performance.now();
  let isOver = false;
  const step = (now) => {
    frames.push(now - last);
    last = now;
    if (!isOver) requestAnimationFrame(step);
  };
  requestAnimationFrame(step);
  globalThis.endFrames = () => {
    isOver = true;
    return frames.slice(2);
  };
})()`;

/** Milliseconds from frame to frame of a page while something is done on it. */
export async function framesWhile(page: Page, work: () => Promise<void>): Promise<number[]> {
  await page.evaluate(watchFrames);
  await work();
  return page.evaluate<number[]>('endFrames()');
}

export interface FrameFigures {
  medianMs: number;
  p95Ms: number;
  longestMs: number;
  /** Of the frames, those over 25 ms. */
  slowShare: number;
}

export function frameFigures(framesMs: readonly number[]): FrameFigures {
  const sorted = [...framesMs].sort((a, b) => a - b);
  const { median, most } = spreadOf(sorted);
  return {
    medianMs: median,
    p95Ms: sorted[Math.floor(0.95 * (sorted.length - 1))] ?? Number.NaN,
    longestMs: most,
    slowShare: sorted.filter((ms) => ms > SLOW_FRAME_MS).length / Math.max(1, sorted.length),
  };
}

/** The figures of frames as a row, without what must hold. */
export function framesRow(what: string, framesMs: readonly number[]): BenchRow {
  const { medianMs, p95Ms, longestMs, slowShare } = frameFigures(framesMs);
  const percent = Math.round(slowShare * 1000) / 10;
  return {
    what,
    ours: `${short(medianMs)} ms (p95 ${short(p95Ms)}, over ${SLOW_FRAME_MS} ms ${percent} %, longest ${short(longestMs)}, n ${framesMs.length})`,
  };
}
