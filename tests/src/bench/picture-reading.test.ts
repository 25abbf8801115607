import { describe, expect, it } from 'vitest';
import type { Tile } from '@shared/audio/tile.ts';
import type { RegionFigures, RegionReport } from '@shared/contract/region.ts';
import type { Peaks, PictureLayout } from '@shared/contract/views.ts';
import { methodWords, regionCsv, regionRows } from '@/components/bench/region-words.ts';
import { areSamplesApart, sampleDots } from '@/components/bench/sample-drawing.ts';
import { levelUnder } from '@/composables/bench/level-under.ts';
import type { LevelSources } from '@/composables/bench/level-under.ts';
import { stackedChannels } from '@/composables/bench/useChannels.ts';
import { sufficeFor } from '@/composables/bench/usePeaks.ts';
import { headingOf } from '@/composables/bench/useTiles.ts';

const layout: PictureLayout = {
  band: 'ultrasonic',
  lowHz: 20_000,
  highHz: 60_000,
  bins: 4,
  samplesPerColumn: 8,
  columns: 64,
  columnsPerTile: 16,
  levels: 3,
  frameSamples: 16,
  finerLevels: 0,
};

function tileWith(codes: Record<number, number>): Tile {
  const facts = { bins: 4, columns: 16, samplesPerColumn: 8, startSample: 0, lowHz: 20_000, highHz: 60_000 };
  const all = new Uint8Array(64).fill(40);
  for (const [at, code] of Object.entries(codes)) all[Number(at)] = code;
  return { ...facts, minimumDb: -120, dbPerCode: 0.5, codes: all };
}

describe('the level under a place', () => {
  const sources = (level: number, tile: Tile): LevelSources => ({
    pictures: [layout],
    samplesPerPixel: 16,
    find: (_channel, _band, wanted, index) => (wanted === level && index === 0 ? tile : undefined),
    quietBins: () => () => [10, 20, 30, 40],
  });

  it('is that of the loudest column under the pixel, and how far over the quiet of its bin', () => {
    const found = levelUnder({ channel: 0, sample: 16, hz: 45_000 }, sources(0, tileWith({ 14: 130 })));
    expect(found).toEqual({ levelDb: -55, overQuietDb: 50 });
  });

  it('is read from the coarser level where the wanted one is not here, and from none where none is', () => {
    const place = { channel: 0, sample: 40, hz: 21_000 };
    expect(levelUnder(place, sources(1, tileWith({ 4: 60 })))).toEqual({ levelDb: -90, overQuietDb: 25 });
    expect(levelUnder(place, { ...sources(7, tileWith({})) })).toBeNull();
    expect(levelUnder({ ...place, hz: 900 }, sources(0, tileWith({})))).toBeNull();
  });

  it('says nothing of the quiet before that is known', () => {
    const unknown = { ...sources(0, tileWith({})), quietBins: () => undefined };
    expect(levelUnder({ channel: 0, sample: 3, hz: 30_000 }, unknown)).toEqual({
      levelDb: -100,
      overQuietDb: null,
    });
  });
});

describe('samples one by one', () => {
  const values = [0, 0.5, -0.5, 0.25, 1];
  const peaks: Peaks = { channel: 0, startSample: 100, samplesPerPoint: 1, minimum: values, maximum: values };

  it('are drawn where they are far enough apart, and never from joined points', () => {
    const window = { startSample: 100, endSample: 120 };
    expect(areSamplesApart(peaks, window, 100)).toBe(true);
    expect(areSamplesApart(peaks, window, 99)).toBe(false);
    expect(areSamplesApart({ ...peaks, samplesPerPoint: 2 }, window, 1000)).toBe(false);
  });

  it('stand in the middle of their time, with one beyond either edge', () => {
    const dots = sampleDots(peaks, { startSample: 102, endSample: 104 }, 20);
    expect(dots).toEqual([
      { x: -5, value: 0.5 },
      { x: 5, value: -0.5 },
      { x: 15, value: 0.25 },
      { x: 25, value: 1 },
    ]);
  });
});

describe('what is fetched', () => {
  it('is not fetched again while peaks reach beyond the window and are as fine as its pixels', () => {
    const points = Array.from({ length: 2000 }, () => 0);
    const peaks: Peaks = {
      channel: 1,
      startSample: 1000,
      samplesPerPoint: 10,
      minimum: points,
      maximum: points,
    };
    const wanted = {
      channel: 1,
      window: { startSample: 6000, endSample: 16_000 },
      widthPx: 1000,
      frames: 90_000,
    };
    expect(sufficeFor(peaks, wanted)).toBe(true);
    expect(sufficeFor(peaks, { ...wanted, channel: 0 })).toBe(false);
    expect(sufficeFor(peaks, { ...wanted, widthPx: 1100 })).toBe(false);
    expect(sufficeFor(peaks, { ...wanted, window: { startSample: 10_000, endSample: 20_000 } })).toBe(false);
    expect(
      sufficeFor(peaks, { ...wanted, window: { startSample: 10_000, endSample: 20_000 }, frames: 20_500 }),
    ).toBe(true);
  });

  it('lies where the window goes, as long as it keeps its zoom', () => {
    const before = { startSample: 0, endSample: 100 };
    expect(headingOf({ startSample: 5, endSample: 105 }, before)).toBe(1);
    expect(headingOf(before, { startSample: 5, endSample: 105 })).toBe(-1);
    expect(headingOf({ startSample: 5, endSample: 95 }, before)).toBe(0);
    expect(headingOf(before, before)).toBe(0);
  });

  it('is of eight channels at most, among which the chosen one is', () => {
    expect(stackedChannels(3, 1)).toEqual([0, 1, 2]);
    expect(stackedChannels(20, 9)).toEqual([8, 9, 10, 11, 12, 13, 14, 15]);
    expect(stackedChannels(18, 17)).toEqual([16, 17]);
  });
});

describe('the figures of a region', () => {
  const figures: RegionFigures = {
    startSample: 100,
    endSample: 292,
    durationS: 0.001,
    rmsDb: -20.04,
    peakDb: -10,
    crestDb: 13.05,
    shareAbove20kHz: 0.25,
    peakFrequencyHz: 61_000,
    centroidHz: 40_000.5,
    spectrum: {
      method: 'single-frame',
      frameSamples: 192,
      averages: 1,
      binHz: 750,
      densityDbPerHz: [-90, -80.5],
    },
  };
  const report: RegionReport = { channel: 1, region: figures, quiet: null };

  it('stand beside those of the quiet, with a dash where there is none', () => {
    const share = regionRows(report).find(({ key }) => key === 'shareAbove20kHz');
    expect(share).toMatchObject({ term: 'Above 20 kHz', region: '25\u00A0%', quiet: '\u2013' });
    expect(methodWords(report)).toContain('A single Hann frame of 192 samples');
  });

  it('are one table for other programs: numbers with a point, units in a column of their own', () => {
    const lines = regionCsv({ ...report, quiet: { ...figures, rmsDb: null } }).split('\r\n');
    expect(lines[0]).toBe('quantity,frequencyHz,unit,region,quiet');
    expect(lines).toContain('startSample,,,100,100');
    expect(lines).toContain('rmsDb,,dB re full scale,-20.04,');
    expect(lines).toContain('density,1500,dB re full scale squared per Hz,-80.5,-80.5');
    expect(lines.every((line) => line === '' || line.split(',').length === 5)).toBe(true);
  });
});
