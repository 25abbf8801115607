import { describe, expect, it } from 'vitest';
import { onsetCriterion, pickOnset } from '../../../server/signal/onset.ts';

/** 100 samples of alternating 0.1, then 100 of alternating 1. */
function stepOfVariance(): Float64Array {
  return Float64Array.from({ length: 200 }, (_, n) => (n % 2 === 0 ? 1 : -1) * (n < 100 ? 0.1 : 1));
}

describe('onset by two variances', () => {
  // Values: Maeda 1985's formula in closed form, population variance; computed outside the project.
  it('has its minimum of 100 ln 0.01 at the step', () => {
    const curve = onsetCriterion(stepOfVariance());
    expect(curve[100]).toBeCloseTo(-460.517019, 5);
    expect(curve[99]).toBeCloseTo(-456.907083, 5);
    expect(curve[101]).toBeCloseTo(-396.630548, 5);
    expect(Math.min(...curve)).toBe(curve[100]);
  });

  it('places the onset at the step and knows it within a sample', () => {
    const pick = pickOnset(stepOfVariance(), { minimumStepDb: 6 });
    expect(pick?.index).toBe(100);
    expect(pick?.stepDb).toBeCloseTo(20, 6);
    expect(pick?.uncertaintySamples).toBeLessThan(1);
  });

  it('finds none where the step is under the gate', () => {
    const even = Float64Array.from({ length: 200 }, (_, n) => Math.sin(n * 1.7));
    expect(pickOnset(even, { minimumStepDb: 6 })).toBeNull();
  });

  it('stays finite in digital silence', () => {
    const silence = new Float64Array(50);
    expect([...onsetCriterion(silence)].some(Number.isNaN)).toBe(false);
    expect(pickOnset(silence, { minimumStepDb: 3 })).toBeNull();
  });

  it('finds none in fewer than four samples', () => {
    expect(pickOnset(new Float64Array([1, 2, 3]), { minimumStepDb: 0 })).toBeNull();
  });
});
