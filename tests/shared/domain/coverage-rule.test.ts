import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import {
  coarsestSamplesPerPixel,
  shareCovered,
  uncovered,
  zoomStep,
} from '../../../shared/domain/coverage-rule.ts';
import { samplesIn } from '../../../shared/domain/span-set.ts';

const part = [
  { startSample: 100, endSample: 200 },
  { startSample: 400, endSample: 500 },
];

describe('coverage', () => {
  test('is the share of the part in all channels; what lies outside the part does not count', () => {
    const seen = [
      { channel: 0, startSample: 0, endSample: 150 },
      { channel: 1, startSample: 450, endSample: 900 },
      { channel: 0, startSample: 120, endSample: 150 },
    ];
    expect(shareCovered(seen, { part, channels: 1 })).toBe(0.25);
    expect(shareCovered(seen, { part, channels: 2 })).toBe(0.25);
    expect(shareCovered([], { part, channels: 2 })).toBe(0);
    expect(shareCovered([], { part: [], channels: 2 })).toBe(1);
  });

  test('and what is left make up the part', () => {
    const anySpan = fc.record({
      channel: fc.nat(2),
      startSample: fc.nat(600),
      endSample: fc.nat(600),
    });
    fc.assert(
      fc.property(fc.array(anySpan), (spans) => {
        const extent = { part, channels: 2 };
        const left = samplesIn(uncovered(spans, extent));
        expect(shareCovered(spans, extent) + left / 400).toBeCloseTo(1, 12);
      }),
    );
  });

  test('counts as seen up to 10 ms in a pixel', () => {
    expect(coarsestSamplesPerPixel(192_000)).toBe(1920);
    expect(coarsestSamplesPerPixel(1_000_000)).toBe(10_000);
    expect(coarsestSamplesPerPixel(50)).toBe(1);
  });

  test('keeps like zooms together and never lifts one over the limit', () => {
    expect(zoomStep(1_030, 192_000)).toBe(1920);
    expect(zoomStep(900, 192_000)).toBe(1024);
    expect(zoomStep(0.3, 192_000)).toBe(0.5);
    expect(zoomStep(5_000, 192_000)).toBe(8192);
  });
});
