import { describe, expect, it } from 'vitest';
import { planFrames } from '../../../server/signal/frame-plan.ts';
import { packageEngine } from '../../../server/signal/package-engine.ts';
import {
  ColumnPyramid,
  columnsAtLevel,
  encodeColumn,
  planPictures,
} from '../../../server/signal/spectrogram-columns.ts';

function layoutsOf(sampleRateHz: number, frames = 10_000_000) {
  return planPictures(planFrames(sampleRateHz, frames)).map((picture) => picture.layout);
}

describe('the pictures', () => {
  it.each([44_100, 48_000, 192_000, 500_000, 1_000_000, 20_000_000])(
    'at %d Hz show 0 to 20 kHz in 140 to 310 lines, and all above it in at most 512',
    (rateHz) => {
      const [audible, ultrasonic] = layoutsOf(rateHz);
      expect(audible!.bins).toBeGreaterThan(140);
      expect(audible!.bins).toBeLessThan(310);
      expect(Math.abs(audible!.highHz - 20_000)).toBeLessThan(150);
      expect(ultrasonic!.bins).toBeLessThanOrEqual(512);
      expect(ultrasonic!.highHz).toBeLessThanOrEqual(rateHz / 2);
      expect(ultrasonic!.highHz).toBeGreaterThan(0.49 * rateHz);
    },
  );

  it('have no ultrasonic one where the rate leaves nothing above 20 kHz', () => {
    expect(layoutsOf(32_000).map((layout) => layout.band)).toEqual(['audible']);
    expect(layoutsOf(40_000).map((layout) => layout.band)).toEqual(['audible']);
  });

  it('end at the level that fits into one tile', () => {
    const [audible] = layoutsOf(192_000, 192_000 * 60);
    expect(columnsAtLevel(audible!.columns, audible!.levels - 1)).toBeLessThanOrEqual(256);
    expect(columnsAtLevel(audible!.columns, audible!.levels - 2)).toBeGreaterThan(256);
    expect(layoutsOf(192_000, 1000)[0]!.levels).toBe(1);
  });
});

describe('a column', () => {
  it('codes 0 dB as 240 and -120 dB as 0, in steps of half a decibel, clipped at both ends', () => {
    const levelsDb = [0, -0.5, -60, -119.5, -120, -300, 7.5, 30];
    const power = Float32Array.from(levelsDb, (db) => 10 ** (db / 10));
    const codes = new Uint8Array(levelsDb.length);
    encodeColumn(power, 0, power.length, codes);
    expect([...codes]).toEqual([240, 239, 120, 1, 0, 0, 255, 255]);
  });

  it('is within one code of the exact level, and of zero power 0', () => {
    const power = Float32Array.from({ length: 500 }, (_, i) => 10 ** (-i / 50) * 1.234);
    const codes = new Uint8Array(500);
    encodeColumn(power, 0, 500, codes);
    for (let i = 0; i < 500; i++) {
      const exact = (10 * Math.log10(power[i]!) + 120) / 0.5;
      expect(Math.abs(codes[i]! - Math.min(255, Math.max(0, exact)))).toBeLessThanOrEqual(0.52);
    }
    encodeColumn(new Float32Array(4), 0, 4, codes);
    expect(codes[0]).toBe(0);
  });
});

describe('the levels above', () => {
  it('keep a click of one column at every level, at its place', () => {
    const [, picture] = planPictures(planFrames(192_000, 128 * 5000));
    const { layout } = picture!;
    const seen: number[][] = Array.from({ length: layout.levels }, () => []);
    const pyramid = new ColumnPyramid({
      bins: layout.bins,
      firstLevel: 1,
      levels: layout.levels,
      engine: packageEngine(),
      sink: (level, codes) => seen[level]!.push(codes[50]!),
    });
    const codes = new Uint8Array(layout.bins);
    for (let index = 0; index < columnsAtLevel(layout.columns, 1); index++) {
      pyramid.push(codes.fill(index === Math.floor(3333 / 4) ? 200 : 20));
    }
    pyramid.finish();
    for (let level = 1; level < layout.levels; level++) {
      expect(seen[level]).toHaveLength(columnsAtLevel(layout.columns, level));
      expect(seen[level]!.indexOf(200)).toBe(Math.floor(3333 / 4 ** level));
      expect(Math.min(...seen[level]!)).toBe(20);
    }
  });
});
