import { describe, expect, it } from 'vitest';
import { nonFiniteRefusal } from '../../../server/signal/non-finite.ts';

describe('samples that are not a number or infinite', () => {
  it.each([
    ['none', [0, 0], 5],
    ['one in a thousand', [1, 0], 1000],
    ['one in a thousand of each channel', [50, 50], 50_000],
  ])('are passed over where there are %s', (_, counts, frames) => {
    expect(nonFiniteRefusal(counts, frames)).toBeUndefined();
  });

  it('are named with their channel where one channel has more', () => {
    expect(nonFiniteRefusal([3, 12_346], 12_345_000)).toBe(
      'Of channel 1, 12,346 of 12,345,000 samples are not a number or infinite. Up to one in a thousand is passed over; with more the recording cannot be measured.',
    );
  });

  it('refuse a short recording for a single one', () => {
    expect(nonFiniteRefusal([1], 999)).toContain('1 of 999 samples');
  });
});
