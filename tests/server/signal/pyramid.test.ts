import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { PeakPyramid, pyramidCell, pyramidLevels } from '../../../server/signal/pyramid.ts';
import { forEachCell } from '../../../server/signal/sample-cells.ts';
import { whiteNoiseSignal } from '../../support/wav/signals.ts';

function pyramidOf(samples: Float32Array, blockFrames: number): [number, number][][] {
  const levels: [number, number][][] = pyramidLevels(samples.length).map(() => []);
  const pyramid = new PeakPyramid(pyramidLevels(samples.length).length, (level, low, high) =>
    levels[level]!.push([low, high]),
  );
  for (let from = 0; from < samples.length; from += blockFrames) {
    const to = Math.min(from + blockFrames, samples.length);
    forEachCell(samples, { from, to, startSample: from }, (cell) => pyramid.push(cell));
  }
  pyramid.finish();
  return levels;
}

describe('the peak pyramid', () => {
  it('has levels of a quarter each, down to one point', () => {
    expect(pyramidLevels(1)).toEqual([1]);
    expect(pyramidLevels(257)).toEqual([2, 1]);
    expect(pyramidLevels(256 * 17)).toEqual([17, 5, 2, 1]);
  });

  it('holds exactly the least and greatest sample of every cell at every level, however it is fed', () => {
    fc.assert(
      fc.property(fc.integer({ min: 1, max: 20_000 }), fc.integer({ min: 1, max: 3000 }), (frames, block) => {
        const samples = whiteNoiseSignal(frames, 0.3, frames);
        const levels = pyramidOf(samples, block);
        expect(levels.map((points) => points.length)).toEqual(pyramidLevels(frames));
        for (const [level, points] of levels.entries()) {
          for (const [index, [low, high]] of points.entries()) {
            const cell = samples.subarray(index * pyramidCell(level), (index + 1) * pyramidCell(level));
            expect(low).toBe(Math.min(...cell.subarray(0, 60_000)));
            expect(high).toBe(Math.max(...cell.subarray(0, 60_000)));
          }
        }
      }),
      { numRuns: 30 },
    );
  });
});
