import { frameStart, type FrameGrid } from './frame-plan.ts';

/** Frames that follow one another hop by hop. */
export interface FrameRun {
  /** Sample of the recording at which the first one begins. */
  startSample: number;
  /** Index of the first one. */
  first: number;
  count: number;
}

/** Splits the frames `[first, end)` of a grid into runs: those at both ends of a recording are moved inside. */
export function frameRuns(
  grid: FrameGrid,
  frames: number,
  { first, end }: { first: number; end: number },
): FrameRun[] {
  const runs: FrameRun[] = [];
  let open: FrameRun | undefined;
  for (let index = first; index < end; index++) {
    const startSample = frameStart(grid, index, frames);
    if (open && startSample === open.startSample + open.count * grid.hop) {
      open.count++;
      continue;
    }
    open = { startSample, first: index, count: 1 };
    runs.push(open);
  }
  return runs;
}
