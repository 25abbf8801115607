import { describe, expect, it } from 'vitest';
import { classesShown, countsOf, rankOfStep, stepOfSample } from '@/composables/candidates/step-counts.ts';

const overview = {
  startSample: 1000,
  endSample: 1300,
  samplesPerStep: 100,
  steps: { below: [1, 0, 2], across: [0, 1, 0], above: [4, 0, 1], unknown: [0, 0, 1] },
};

describe('the strip of time', () => {
  it('adds up the classes that the list shows', () => {
    expect(countsOf(overview, classesShown(null))).toEqual([5, 1, 4]);
    expect(countsOf(overview, classesShown('above'))).toEqual([4, 0, 1]);
  });

  it('leads to the first row whose onset lies in a step or behind it', () => {
    const counts = countsOf(overview, classesShown(null));
    expect([0, 1, 2].map((step) => rankOfStep(counts, step))).toEqual([0, 5, 6]);
  });

  it('finds the step of a sample, the nearest for one outside', () => {
    expect([0, 1000, 1099, 1100, 1299, 9999].map((sample) => stepOfSample(overview, sample))).toEqual([
      0, 0, 0, 1, 2, 2,
    ]);
  });
});
