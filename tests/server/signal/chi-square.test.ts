import { describe, expect, it } from 'vitest';
import { chiSquareTail, chiSquareThreshold } from '../../../server/signal/chi-square.ts';

describe('chi-square thresholds', () => {
  // Abramowitz and Stegun 1964, table 26.8 (from memory): upper 5 % points 5.991 (2), 18.307 (10); 0.1 % 29.588 (10).
  it('agree with the printed table', () => {
    expect(chiSquareTail(5.991465, 2)).toBeCloseTo(0.05, 6);
    expect(chiSquareThreshold(10, 0.05)).toBeCloseTo(18.307, 3);
    expect(chiSquareThreshold(10, 0.001)).toBeCloseTo(29.588, 3);
  });

  it('lie between their neighbours for odd degrees', () => {
    // Same table: 12.592 (6), 14.067 (7), 15.507 (8).
    expect(Math.abs(chiSquareThreshold(7, 0.05) - 14.067)).toBeLessThan(0.05);
  });

  it('refuse an odd number in the closed form', () => {
    expect(() => chiSquareTail(1, 3)).toThrow(RangeError);
  });
});
