import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { decimalsOf, niceStep } from '@/composables/axis-ticks.ts';
import {
  clampWindow,
  panBy,
  pixelAtSample,
  sampleAtPixel,
  timeTicks,
  windowAround,
  windowSamples,
  zoomAround,
} from '@/composables/bench/time-axis.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

const frames = fc.integer({ min: 1, max: 4_000_000_000 });
const share = fc.double({ min: 0, max: 1, noNaN: true });

interface Scene {
  frames: number;
  window: TimeWindow;
}

const scene: fc.Arbitrary<Scene> = fc.tuple(frames, share, share).map(([total, at, length]) => ({
  frames: total,
  window: clampWindow({ startSample: at * total, endSample: at * total + length * total }, total),
}));

function isInside(window: TimeWindow, total: number): boolean {
  return window.startSample >= 0 && window.endSample <= total + 1e-6 && windowSamples(window) > 0;
}

describe('time axis', () => {
  it('finds the same sample again after going to pixels and back', () => {
    fc.assert(
      fc.property(scene, share, fc.integer({ min: 1, max: 8000 }), ({ window }, at, widthPx) => {
        const sample = window.startSample + at * windowSamples(window);
        const back = sampleAtPixel(pixelAtSample(sample, window, widthPx), window, widthPx);
        expect(Math.abs(back - sample)).toBeLessThanOrEqual(1e-9 * Math.max(1, window.endSample));
      }),
    );
  });

  it('keeps every window inside the recording', () => {
    fc.assert(
      fc.property(
        scene,
        fc.double({ min: 0.001, max: 1000, noNaN: true }),
        fc.double({ min: -5, max: 5, noNaN: true }),
        ({ frames: total, window }, factor, pan) => {
          const zoomed = zoomAround(window, factor, window.startSample, total);
          expect(isInside(zoomed, total)).toBe(true);
          expect(isInside(panBy(zoomed, pan * windowSamples(zoomed), total), total)).toBe(true);
        },
      ),
    );
  });

  it('keeps the sample under the pointer in place while zooming in', () => {
    fc.assert(
      fc.property(scene, share, ({ frames: total, window }, at) => {
        fc.pre(windowSamples(window) > 64);
        const anchor = window.startSample + at * windowSamples(window);
        const zoomed = zoomAround(window, 0.5, anchor, total);
        const before = pixelAtSample(anchor, window, 1000);
        expect(pixelAtSample(anchor, zoomed, 1000)).toBeCloseTo(before, 3);
      }),
    );
  });

  it('keeps the zoom when it pans against an end', () => {
    expect(panBy({ startSample: 100, endSample: 300 }, -1000, 5000)).toEqual({
      startSample: 0,
      endSample: 200,
    });
  });

  it('gives a span room on both sides', () => {
    const window = windowAround({ startSample: 10_000, endSample: 10_100 }, 1_000_000);
    expect(window.startSample).toBeLessThan(10_000);
    expect(window.endSample).toBeGreaterThan(10_100);
  });

  it('steps by 1, 2 or 5 times a power of ten', () => {
    expect([0.0031, 0.02, 0.7, 1, 3, 60].map(niceStep)).toEqual([0.005, 0.02, 1, 1, 5, 100]);
    expect([1, 0.5, 0.02, 0.001].map(decimalsOf)).toEqual([0, 1, 2, 3]);
  });

  it('labels equal steps that do not come closer than asked', () => {
    fc.assert(
      fc.property(scene, fc.integer({ min: 200, max: 3000 }), ({ window }, widthPx) => {
        const sampleRateHz = 192_000;
        const ticks = timeTicks(window, { sampleRateHz, widthPx, distancePx: 110 });
        const places = ticks.map(({ value }) => pixelAtSample(value * sampleRateHz, window, widthPx));
        for (let index = 1; index < places.length; index++)
          expect((places[index] ?? 0) - (places[index - 1] ?? 0)).toBeGreaterThan(100);
        expect(new Set(ticks.map(({ label }) => label)).size).toBe(ticks.length);
      }),
      { numRuns: 60 },
    );
  });

  it('writes a clock over minutes and seconds with a unit over milliseconds', () => {
    const options = { sampleRateHz: 1000, widthPx: 500 };
    expect(timeTicks({ startSample: 0, endSample: 100_000 }, options).map(({ label }) => label)).toEqual([
      '0:00',
      '0:30',
      '1:00',
      '1:30',
    ]);
    const [first] = timeTicks({ startSample: 0.5, endSample: 41 }, options);
    expect(first?.label).toBe('0.01\u00A0s');
  });
});
