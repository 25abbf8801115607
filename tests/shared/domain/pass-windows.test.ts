import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { countForShare, drawWindows, partOfPass, windowsFault } from '../../../shared/domain/pass-windows.ts';

const anyPlan = fc
  .record({
    frames: fc.integer({ min: 10, max: 1e9 }),
    count: fc.integer({ min: 1, max: 50 }),
    seed: fc.nat(),
  })
  .chain((plan) => {
    const most = Math.floor(plan.frames / plan.count);
    return most < 1
      ? fc.constant({ ...plan, count: 1, windowSamples: 1 })
      : fc.record({
          frames: fc.constant(plan.frames),
          count: fc.constant(plan.count),
          seed: fc.constant(plan.seed),
          windowSamples: fc.integer({ min: 1, max: most }),
        });
  });

describe('windows of a pass', () => {
  test('lie one in each equal part of the recording, whole, and of the length asked for', () => {
    fc.assert(
      fc.property(anyPlan, ({ seed, ...plan }) => {
        const windows = drawWindows(plan, seed);
        expect(windows).toHaveLength(plan.count);
        windows.forEach(({ startSample, endSample, stratum }, index) => {
          expect(stratum).toBe(index);
          expect(endSample - startSample).toBe(plan.windowSamples);
          expect(startSample).toBeGreaterThanOrEqual(Math.floor((index * plan.frames) / plan.count));
          expect(endSample).toBeLessThanOrEqual(Math.floor(((index + 1) * plan.frames) / plan.count));
        });
      }),
    );
  });

  test('can be drawn again from the seed that was kept', () => {
    const plan = { frames: 5_760_000, count: 12, windowSamples: 48_000 };
    expect(drawWindows(plan, 71)).toEqual(drawWindows(plan, 71));
    expect(drawWindows(plan, 71)).not.toEqual(drawWindows(plan, 72));
  });

  test('begin anywhere in their part alike: the mean place over many seeds is its middle', () => {
    const plan = { frames: 1_000, count: 1, windowSamples: 1 };
    const starts = Array.from({ length: 20_000 }, (_, seed) => drawWindows(plan, seed)[0]!.startSample);
    const mean = starts.reduce((sum, start) => sum + start, 0) / starts.length;
    // Standard error of the mean of 20,000 uniform places among 1,000: 1000 / sqrt(12 * 20000) = 2.
    expect(Math.abs(mean - 499.5)).toBeLessThan(8);
    expect(Math.min(...starts)).toBeLessThan(10);
    expect(Math.max(...starts)).toBeGreaterThan(989);
  });

  test('that do not fit are told in a sentence and never drawn', () => {
    const plan = { frames: 1_000, count: 4, windowSamples: 251 };
    expect(windowsFault(plan)).toMatch(/do not fit/);
    expect(() => drawWindows(plan, 1)).toThrow(RangeError);
    expect(windowsFault({ ...plan, windowSamples: 250 })).toBeNull();
  });

  test('by share are as many as make it up, at least one, and no more than fit', () => {
    const frames = 3_600 * 1_000;
    expect(countForShare({ frames, windowSamples: 30_000 }, 0.1)).toBe(12);
    expect(countForShare({ frames, windowSamples: 30_000 }, 0.0001)).toBe(1);
    expect(countForShare({ frames: 100, windowSamples: 40 }, 1)).toBe(2);
  });

  test('are the part of the pass; without any it is the whole recording', () => {
    expect(partOfPass(null, 500)).toEqual([{ startSample: 0, endSample: 500 }]);
    expect(partOfPass([{ startSample: 5, endSample: 9 }], 500)).toEqual([{ startSample: 5, endSample: 9 }]);
  });
});
