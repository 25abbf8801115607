import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { frameStart } from '../../../server/signal/frame-plan.ts';
import { frameRuns } from '../../../server/signal/frame-runs.ts';

const gridOf = (frames: number) => ({ size: 256, hop: 128, count: Math.ceil(frames / 128) });

describe('runs of frames', () => {
  it('are the first frame, those that follow hop by hop, and the last', () => {
    expect(frameRuns(gridOf(1280), 1280, { first: 0, end: 10 })).toEqual([
      { startSample: 0, first: 0, count: 1 },
      { startSample: 64, first: 1, count: 8 },
      { startSample: 1024, first: 9, count: 1 },
    ]);
  });

  it('hold every frame asked for once, where it begins', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 4000 }), fc.nat(40), fc.nat(40), (frames, a, b) => {
        const grid = gridOf(frames);
        const first = Math.min(a, grid.count);
        const end = Math.max(first, Math.min(b, grid.count));
        const starts = frameRuns(grid, frames, { first, end }).flatMap((run) =>
          Array.from({ length: run.count }, (_, i) => [run.first + i, run.startSample + i * grid.hop]),
        );
        const wanted = Array.from({ length: end - first }, (_, i) => [
          first + i,
          frameStart(grid, first + i, frames),
        ]);
        expect(starts).toEqual(wanted);
      }),
    );
  });
});
