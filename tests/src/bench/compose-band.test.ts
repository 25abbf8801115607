import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Tile } from '@shared/audio/tile.ts';
import type { PictureLayout } from '@shared/contract/views.ts';
import { composeBand, QUIET_CODE } from '@/components/bench/compose-band.ts';

const layout: PictureLayout = {
  band: 'audible',
  lowHz: 0,
  highHz: 400,
  bins: 4,
  frameSamples: 8,
  finerLevels: 0,
  samplesPerColumn: 10,
  columns: 64,
  columnsPerTile: 16,
  levels: 3,
};
/** Each code is its own pixel, so that codes can be read from the picture. */
const table = Uint32Array.from({ length: 256 + QUIET_CODE }, (_, code) => code);
const EMPTY = 999;

function tileOf(level: number, codeAt: (column: number, bin: number) => number, first: number): Tile {
  const columns = Math.min(16, Math.ceil(64 / 4 ** level) - first);
  const codes = new Uint8Array(columns * 4);
  for (let column = 0; column < columns; column++)
    for (let bin = 0; bin < 4; bin++) codes[column * 4 + bin] = codeAt(first + column, bin);
  const place = { samplesPerColumn: 10 * 4 ** level, startSample: first * 10 * 4 ** level };
  return { ...layout, ...place, columns, minimumDb: -120, dbPerCode: 0.5, codes };
}

function compose(options: {
  widthPx: number;
  heightPx: number;
  window?: { startSample: number; endSample: number };
  level?: number;
  findTile: (level: number, tile: number) => Tile | undefined;
}): number[] {
  const { widthPx, heightPx, level = 0, findTile } = options;
  const pixels = new Uint32Array(widthPx * heightPx);
  composeBand(pixels, level, {
    layout,
    window: options.window ?? { startSample: 0, endSample: 640 },
    lowHz: 0,
    highHz: 400,
    widthPx,
    heightPx,
    table,
    emptyPixel: EMPTY,
    findTile,
  });
  return [...pixels];
}

const clickAt = (place: number) => (column: number, bin: number) =>
  column === place && bin === 2 ? 200 : 10 + bin;

/** The whole steps that a stretch touches. */
function between(from: number, to: number): number[] {
  const first = Math.floor(from);
  return Array.from({ length: Math.max(1, Math.ceil(to) - first) }, (_, index) => first + index);
}

describe('composing a band', () => {
  it('puts the highest bin on top, and one pixel on each column where they fit', () => {
    const pixels = compose({
      widthPx: 64,
      heightPx: 4,
      findTile: (_level, tile) => tileOf(0, clickAt(5), tile * 16),
    });
    expect([0, 1, 2, 3].map((row) => pixels[row * 64])).toEqual([13, 12, 11, 10]);
    expect(pixels[1 * 64 + 5]).toBe(200);
    expect(pixels.filter((pixel) => pixel === 200)).toHaveLength(1);
  });

  it('shows a click of one column at any width of the picture', () => {
    for (const widthPx of [1, 3, 7, 16, 50]) {
      const pixels = compose({
        widthPx,
        heightPx: 4,
        findTile: (_level, tile) => tileOf(0, clickAt(37), tile * 16),
      });
      expect(pixels).toContain(200);
    }
  });

  it('shows the loudest of the bins that share a row', () => {
    const pixels = compose({
      widthPx: 64,
      heightPx: 1,
      findTile: (_level, tile) => tileOf(0, clickAt(5), tile * 16),
    });
    expect(pixels[0]).toBe(13);
    expect(pixels[5]).toBe(200);
  });

  it('lets the coarser picture stand in where the finer one is not here yet', () => {
    const pixels = compose({
      widthPx: 64,
      heightPx: 4,
      findTile: (level, tile) => {
        if (level === 0) return tile === 0 ? tileOf(0, () => 50, 0) : undefined;
        return level === 1 ? tileOf(1, () => 80, 0) : undefined;
      },
    });
    expect(pixels[15]).toBe(50);
    expect(pixels[16]).toBe(80);
  });

  it('leaves what has not come at all in the colour of the ground', () => {
    const pixels = compose({ widthPx: 8, heightPx: 2, findTile: () => undefined });
    expect(new Set(pixels)).toEqual(new Set([EMPTY]));
  });

  it('gives every pixel of a wide picture the greatest code under it', () => {
    const codeAt = (column: number, bin: number) => (column * 37 + bin * 101) % 251;
    const findTile = (level: number, tile: number) =>
      level === 0 && tile !== 2 ? tileOf(0, codeAt, tile * 16) : undefined;
    const sizes = fc.record({
      widthPx: fc.integer({ min: 1, max: 400 }),
      heightPx: fc.integer({ min: 1, max: 11 }),
      startSample: fc.integer({ min: 0, max: 300 }),
      samples: fc.integer({ min: 1, max: 340 }),
    });
    fc.assert(
      fc.property(sizes, ({ widthPx, heightPx, startSample, samples }) => {
        const window = { startSample, endSample: startSample + samples };
        const pixels = compose({ widthPx, heightPx, window, findTile });
        const step = samples / widthPx;
        for (let at = 0; at < pixels.length; at++) {
          const from = startSample + (at % widthPx) * step;
          const columns = between(from / 10, (from + step) / 10);
          const top = heightPx - Math.floor(at / widthPx);
          const bins = between((4 * (top - 1)) / heightPx + 1e-6, (4 * top) / heightPx - 1e-6);
          const codes = columns.flatMap((column) => bins.map((bin) => codeAt(column, bin)));
          const isHere = columns.every((column) => Math.floor(column / 16) !== 2);
          expect(pixels[at]).toBe(isHere ? Math.max(...codes) : EMPTY);
        }
      }),
      { numRuns: 30 },
    );
  });

  it('shows every bin over its own quiet: a steady line vanishes, a click and its height stay', () => {
    const hum = (column: number, bin: number) =>
      (bin === 1 ? 150 : 20) + (column === 5 && bin === 2 ? 90 : 0);
    const pixels = new Uint32Array(64 * 4);
    const image = { layout, window: { startSample: 0, endSample: 640 }, lowHz: 0, highHz: 400 };
    composeBand(pixels, 0, {
      ...image,
      widthPx: 64,
      heightPx: 4,
      table,
      emptyPixel: EMPTY,
      findTile: (_level, tile) => tileOf(0, hum, tile * 16),
      quietOf: () => [20, 150, 20, 20],
    });
    expect(pixels[1 * 64 + 5]).toBe(QUIET_CODE + 90);
    pixels[1 * 64 + 5] = QUIET_CODE;
    expect(new Set(pixels)).toEqual(new Set([QUIET_CODE]));
  });

  it('paints the asked columns alone, and says which of them show the wanted level', () => {
    const pixels = new Uint32Array(64 * 4).fill(7);
    const whole = new Uint8Array(64).fill(9);
    composeBand(
      pixels,
      0,
      {
        layout,
        window: { startSample: 0, endSample: 640 },
        lowHz: 0,
        highHz: 400,
        widthPx: 64,
        heightPx: 4,
        table,
        emptyPixel: EMPTY,
        findTile: (level, tile) =>
          level === 1 || tile === 0 ? tileOf(level, () => 50, tile * 16) : undefined,
      },
      { fromPx: 10, endPx: 20, whole },
    );
    expect([...pixels.subarray(64, 128)].map((pixel) => pixel === 7)).toEqual(
      Array.from({ length: 64 }, (_, x) => x < 10 || x >= 20),
    );
    expect([...whole.subarray(9, 21)]).toEqual([9, 1, 1, 1, 1, 1, 1, 0, 0, 0, 0, 9]);
  });
});
