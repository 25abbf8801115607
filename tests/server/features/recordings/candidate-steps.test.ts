import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { gridOf, tallySteps } from '../../../../server/features/recordings/candidate-steps.ts';

describe('the steps of a window', () => {
  test('are the whole recording where no window is asked for', () => {
    expect(gridOf({ steps: 4, frames: 1000 })).toEqual({
      startSample: 0,
      endSample: 1000,
      samplesPerStep: 250,
      steps: 4,
    });
  });

  test('hold whole samples, so that the last may be shorter and there may be fewer than asked for', () => {
    expect(gridOf({ steps: 4, frames: 10 })).toMatchObject({ samplesPerStep: 3, steps: 4 });
    expect(gridOf({ steps: 400, frames: 10 })).toMatchObject({ samplesPerStep: 1, steps: 10 });
  });

  test('lie inside the recording and are never empty, whatever is asked for', () => {
    const sample = fc.option(fc.integer({ min: 0, max: 5000 }), { nil: undefined });
    fc.assert(
      fc.property(
        sample,
        sample,
        fc.integer({ min: 1, max: 1000 }),
        fc.integer({ min: 1, max: 3000 }),
        (startSample, endSample, steps, frames) => {
          const grid = gridOf({ startSample, endSample, steps, frames });
          expect(grid.startSample).toBeGreaterThanOrEqual(0);
          expect(grid.endSample).toBeGreaterThan(grid.startSample);
          expect(grid.endSample).toBeLessThanOrEqual(frames);
          expect(grid.steps).toBeLessThanOrEqual(steps);
          const covered = grid.startSample + grid.steps * grid.samplesPerStep;
          expect(covered).toBeGreaterThanOrEqual(grid.endSample);
          expect(covered - grid.samplesPerStep).toBeLessThan(grid.endSample);
        },
      ),
    );
  });
});

describe('counts of steps', () => {
  test('are added up by class and step, however often a step comes', () => {
    const grid = gridOf({ steps: 3, frames: 30 });
    const overview = tallySteps(
      [
        { hearingClass: 'above', step: 0, count: 2 },
        { hearingClass: 'above', step: 0, count: 3 },
        { hearingClass: 'below', step: 2, count: 1 },
      ],
      grid,
    );
    expect(overview).toEqual({
      total: 6,
      classes: { below: 1, across: 0, above: 5, unknown: 0 },
      startSample: 0,
      endSample: 30,
      samplesPerStep: 10,
      steps: { below: [0, 0, 1], across: [0, 0, 0], above: [5, 0, 0], unknown: [0, 0, 0] },
    });
  });
});
