import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PictureLayout } from '@shared/contract/views.ts';
import {
  columnsAtLevel,
  columnSamples,
  frameSamplesAt,
  levelFor,
  planTiles,
  tilesOfWindow,
} from '@/composables/bench/tile-plan.ts';
import { clampWindow } from '@/composables/bench/time-axis.ts';

function layoutOf(columns: number): PictureLayout {
  let levels = 1;
  while (Math.ceil(columns / 4 ** (levels - 1)) > 256) levels++;
  return {
    band: 'ultrasonic',
    lowHz: 20_000,
    highHz: 96_000,
    bins: 100,
    frameSamples: 256,
    finerLevels: 3,
    samplesPerColumn: 128,
    columns,
    columnsPerTile: 256,
    levels,
  };
}

const scene = fc
  .record({
    columns: fc.integer({ min: 1, max: 20_000_000 }),
    at: fc.double({ min: 0, max: 1, noNaN: true }),
    length: fc.double({ min: 1e-6, max: 1, noNaN: true }),
    widthPx: fc.integer({ min: 1, max: 4000 }),
  })
  .map(({ columns, at, length, widthPx }) => {
    const frames = columns * 128;
    const startSample = at * frames;
    const window = clampWindow({ startSample, endSample: startSample + length * frames }, frames);
    const samplesPerPixel = (window.endSample - window.startSample) / widthPx;
    return { layout: layoutOf(columns), frames, window, samplesPerPixel };
  });

describe('tile plan', () => {
  it('covers the window from its first to its last sample without a gap', () => {
    fc.assert(
      fc.property(scene, ({ layout, frames, window, samplesPerPixel }) => {
        const { level, shown } = planTiles(layout, window, samplesPerPixel);
        const tileSamples = columnSamples(layout, level) * layout.columnsPerTile;
        const first = shown[0];
        const last = shown.at(-1);
        expect((first?.tile ?? 1) * tileSamples).toBeLessThanOrEqual(window.startSample);
        expect(Math.min(frames, ((last?.tile ?? 0) + 1) * tileSamples)).toBeGreaterThanOrEqual(
          Math.floor(window.endSample),
        );
        shown.forEach(({ tile }, index) => expect(tile).toBe((first?.tile ?? 0) + index));
      }),
    );
  });

  it('asks for no tile that the recording does not have', () => {
    fc.assert(
      fc.property(scene, ({ layout, window, samplesPerPixel }) => {
        const { shown, ahead } = planTiles(layout, window, samplesPerPixel);
        for (const { level, tile } of [...shown, ...ahead]) {
          expect(level).toBeLessThan(layout.levels);
          expect(level).toBeGreaterThanOrEqual(-layout.finerLevels);
          expect(tile).toBeGreaterThanOrEqual(0);
          expect(tile * layout.columnsPerTile).toBeLessThan(columnsAtLevel(layout, level));
        }
      }),
    );
  });

  it('has at least a column for each pixel, where the recording has as many, and fewer than four tiles too many', () => {
    fc.assert(
      fc.property(scene, ({ layout, samplesPerPixel }) => {
        const level = levelFor(layout, samplesPerPixel);
        const columnsPerPixel = samplesPerPixel / columnSamples(layout, level);
        if (level > 0) expect(columnsPerPixel).toBeGreaterThanOrEqual(1 - 1e-6);
        if (level < layout.levels - 1) expect(columnsPerPixel).toBeLessThan(4 + 1e-6);
      }),
    );
  });

  it('takes finer levels where columns would be wider than four pixels, as far as there are any', () => {
    const layout = layoutOf(10_000);
    const levels = [128, 33, 32, 31, 9, 8, 7, 2, 1.9, 0.02].map((samplesPerPixel) =>
      levelFor(layout, samplesPerPixel),
    );
    expect(levels).toEqual([0, 0, 0, -1, -1, -1, -2, -2, -3, -3]);
    expect([0, -1, -3, 2].map((level) => frameSamplesAt(layout, level))).toEqual([256, 128, 32, 256]);
    expect(columnsAtLevel(layout, -2)).toBe(160_000);
  });

  it('fetches no finer tiles while the window moves', () => {
    const layout = layoutOf(256 * 64);
    const window = { startSample: 256 * 128 * 10, endSample: 256 * 128 * 11 };
    const levels = (heading: -1 | 0 | 1) =>
      planTiles(layout, window, 128, heading).ahead.map(({ level }) => level);
    expect(Math.min(...levels(0))).toBe(-1);
    expect(Math.min(...levels(1))).toBe(0);
    expect(Math.min(...levels(-1))).toBe(0);
  });

  it('fetches the whole, the coarser picture, both neighbours and the next finer one ahead', () => {
    const layout = layoutOf(256 * 64);
    const window = { startSample: 256 * 128 * 10, endSample: 256 * 128 * 11 };
    expect(tilesOfWindow(layout, window, 0)).toEqual([{ level: 0, tile: 10 }]);
    expect(planTiles(layout, window, 128).root).toEqual({ level: 3, tile: 0 });
    expect(planTiles(layout, window, 128).ahead).toEqual([
      { level: 1, tile: 2 },
      { level: 0, tile: 11 },
      { level: 0, tile: 9 },
      { level: -1, tile: 41 },
      { level: -1, tile: 42 },
    ]);
  });

  it('fetches further on the side where the window is going', () => {
    const layout = layoutOf(256 * 64);
    const window = { startSample: 256 * 128 * 10, endSample: 256 * 128 * 13 };
    const asked = (heading: -1 | 0 | 1) =>
      planTiles(layout, window, 128, heading)
        .ahead.filter(({ level }) => level === 0)
        .map(({ tile }) => tile);
    expect(asked(1)).toEqual([13, 14, 15, 9]);
    expect(asked(-1)).toEqual([9, 8, 7, 13]);
    expect(asked(0)).toEqual([13, 9]);
  });

  it('asks for nothing twice', () => {
    fc.assert(
      fc.property(scene, ({ layout, window, samplesPerPixel }) => {
        const { shown, ahead } = planTiles(layout, window, samplesPerPixel, 1);
        const keys = [...shown, ...ahead].map(({ level, tile }) => `${level}/${tile}`);
        expect(new Set(keys).size).toBe(keys.length);
      }),
    );
  });
});
