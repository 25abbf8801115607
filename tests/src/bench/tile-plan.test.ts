import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { PictureLayout } from '@shared/contract/views.ts';
import {
  columnsAtLevel,
  columnSamples,
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

  it('fetches the coarser picture and both neighbours ahead', () => {
    const layout = layoutOf(256 * 64);
    const window = { startSample: 256 * 128 * 10, endSample: 256 * 128 * 11 };
    expect(tilesOfWindow(layout, window, 0)).toEqual([{ level: 0, tile: 10 }]);
    expect(planTiles(layout, window, 128).ahead).toEqual([
      { level: 1, tile: 2 },
      { level: 0, tile: 11 },
      { level: 0, tile: 9 },
    ]);
  });
});
