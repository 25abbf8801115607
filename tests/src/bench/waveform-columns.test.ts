import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Peaks } from '@shared/contract/views.ts';
import { greatestMagnitude, niceScale, waveformColumns } from '@/composables/bench/waveform-columns.ts';

function peaksOf(samples: readonly number[], samplesPerPoint: number): Peaks {
  const minimum: number[] = [];
  const maximum: number[] = [];
  for (let at = 0; at < samples.length; at += samplesPerPoint) {
    const part = samples.slice(at, at + samplesPerPoint);
    minimum.push(Math.min(...part));
    maximum.push(Math.max(...part));
  }
  return { channel: 0, startSample: 0, samplesPerPoint, minimum, maximum };
}

describe('columns of the waveform', () => {
  it('has least and greatest in turn, one pair for each pixel', () => {
    const peaks = peaksOf([0.1, -0.2, 0.3, -0.4], 1);
    const columns = waveformColumns(peaks, { startSample: 0, endSample: 4 }, 2);
    expect([...columns].map((value) => Number(value.toFixed(6)))).toEqual([-0.2, 0.1, -0.4, 0.3]);
  });

  it('loses no extreme, however many points share a pixel', () => {
    const samples = fc.array(fc.integer({ min: -1000, max: 1000 }), { minLength: 40, maxLength: 400 });
    fc.assert(
      fc.property(
        samples,
        fc.integer({ min: 1, max: 30 }),
        fc.integer({ min: 1, max: 5 }),
        (all, widthPx, step) => {
          const values = all.map((value) => value / 1000);
          const peaks = peaksOf(values, step);
          fc.pre(peaks.minimum.length >= widthPx);
          const window = { startSample: 0, endSample: peaks.minimum.length * step };
          const columns = waveformColumns(peaks, window, widthPx);
          const least = columns.filter((_, index) => index % 2 === 0);
          const greatest = columns.filter((_, index) => index % 2 === 1);
          expect(Math.min(...least)).toBeCloseTo(Math.min(...values), 6);
          expect(Math.max(...greatest)).toBeCloseTo(Math.max(...values), 6);
        },
      ),
    );
  });

  it('draws straight lines between the middles of samples when they lie apart', () => {
    const peaks = peaksOf([0, 1, 0], 1);
    const columns = waveformColumns(peaks, { startSample: 0, endSample: 3 }, 30);
    expect(columns[2 * 14]).toBeCloseTo(0.95, 5);
    expect(columns[2 * 10]).toBeCloseTo(0.55, 5);
    expect(columns[2 * 10 + 1]).toBe(columns[2 * 10]);
  });

  it('has no value where the peaks do not reach', () => {
    const peaks = { ...peaksOf([0.5, 0.5], 1), startSample: 10 };
    const columns = waveformColumns(peaks, { startSample: 0, endSample: 20 }, 20);
    expect(columns[0]).toBeNaN();
    expect(columns[2 * 10]).toBe(0.5);
    expect(columns[2 * 15]).toBeNaN();
    expect(greatestMagnitude(columns)).toBe(0.5);
  });

  it('scales to 1, 2 or 5 times a power of ten, never beyond full scale', () => {
    expect([0, 0.0031, 0.2, 0.21, 0.9, 1.4].map(niceScale)).toEqual([1, 0.005, 0.2, 0.5, 1, 1]);
  });
});
