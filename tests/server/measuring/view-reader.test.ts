import { describe, expect, it } from 'vitest';
import { decodeTile } from '../../../shared/audio/tile.ts';
import { tileLayoutSchema } from '../../../shared/contract/views.ts';
import { tileLayout } from '../../../server/measuring/view-layout.ts';
import {
  readFrameTable,
  NoSuchViewError,
  readPeaks,
  readTile,
  type ViewSource,
} from '../../../server/measuring/view-reader.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { measured } from './measured.ts';

const RATE_HZ = 192_000;

function noiseWithClick(frames: number, clickAt: number): Float32Array {
  const click = new Float32Array(frames);
  click.set(sine(400, 60_000, RATE_HZ, 0.5), clickAt);
  return mix(whiteNoiseSignal(frames, 0.0005, 1), click);
}

async function tileOf(
  source: ViewSource,
  band: 'audible' | 'ultrasonic',
  level: number,
  tile: number,
  channel = 0,
) {
  return decodeTile(await readTile({ ...source, channel, band, level, tile }));
}

describe('peaks', () => {
  const frames = 1_000_003;
  const samples = noiseWithClick(frames, 777_777);

  it('are exact at every zoom: from the samples and from the pyramid, in either channel', async () => {
    const quiet = samples.map((x) => x / 2);
    const { source } = await measured({
      sampleRateHz: RATE_HZ,
      encoding: 'float',
      bitsPerSample: 32,
      channels: [quiet, samples],
    });
    const spans = [
      [0, frames, 1000],
      [0, frames, 1],
      [0, frames, 8192],
      [123_456, 987_654, 700],
      [777_000, 779_000, 2000],
      [777_000, 779_000, 300],
      [frames - 10, frames, 100],
    ] as const;
    for (const [startSample, endSample, points] of spans) {
      const peaks = await readPeaks({ ...source, channel: 1, startSample, endSample, points });
      const { samplesPerPoint } = peaks;
      expect(peaks.startSample).toBeLessThanOrEqual(startSample);
      expect(startSample - peaks.startSample).toBeLessThan(samplesPerPoint);
      expect(peaks.minimum.length).toBeLessThanOrEqual(points + 1);
      expect(peaks.startSample + peaks.minimum.length * samplesPerPoint).toBeGreaterThanOrEqual(endSample);
      for (const [index, minimum] of peaks.minimum.entries()) {
        const from = peaks.startSample + index * samplesPerPoint;
        const isLast = index === peaks.minimum.length - 1;
        if (isLast) continue;
        const cell = samples.subarray(from, from + samplesPerPoint);
        expect(minimum).toBe(cell.reduce((a, b) => Math.min(a, b)));
        expect(peaks.maximum[index]).toBe(cell.reduce((a, b) => Math.max(a, b)));
      }
    }
  });

  it('give every sample where there are fewer than points, and keep within the recording', async () => {
    const few = Float32Array.from([0.5, -0.25, 0.125]);
    const { source } = await measured({
      sampleRateHz: 48_000,
      encoding: 'float',
      bitsPerSample: 32,
      channels: [few],
    });
    const peaks = await readPeaks({ ...source, channel: 0, startSample: 1, endSample: 99, points: 50 });
    expect(peaks).toEqual({
      channel: 0,
      startSample: 1,
      samplesPerPoint: 1,
      minimum: [-0.25, 0.125],
      maximum: [-0.25, 0.125],
    });
  });
});

describe('tiles', () => {
  const frames = 800_000;
  const clickAt = 500_000;

  it('show a click of 60 kHz in its bin and its column at every level, and nowhere else', async () => {
    const { source, summary } = await measured({
      sampleRateHz: RATE_HZ,
      bitsPerSample: 24,
      channels: [noiseWithClick(frames, clickAt)],
    });
    const layout = tileLayoutSchema.parse(tileLayout(summary.format));
    const picture = layout.pictures.find((one) => one.band === 'ultrasonic')!;
    for (let level = 0; level < picture.levels; level++) {
      const columnSamples = picture.samplesPerColumn * 4 ** level;
      const column = Math.floor((clickAt + 200) / columnSamples);
      const tile = await tileOf(source, 'ultrasonic', level, Math.floor(column / 256));
      expect(tile).toMatchObject({
        bins: picture.bins,
        samplesPerColumn: columnSamples,
        minimumDb: -120,
        dbPerCode: 0.5,
      });
      expect(tile.startSample).toBe(Math.floor(column / 256) * 256 * columnSamples);
      const bin = Math.floor(((60_000 - tile.lowHz) / (tile.highHz - tile.lowHz)) * tile.bins);
      const at = (tileColumn: number) => tile.codes[tileColumn * tile.bins + bin]!;
      expect(at(column % 256) * 0.5 - 120).toBeGreaterThan(-8);
      if (tile.columns > 20)
        expect(at((column % 256) - 8 < 0 ? (column % 256) + 8 : (column % 256) - 8) * 0.5 - 120).toBeLessThan(
          -60,
        );
    }
  });

  it('of level 0, made from the samples, are what the kept level 1 is the maximum of', async () => {
    const samples = [noiseWithClick(150_000, 70_000), whiteNoiseSignal(150_000, 0.01, 2)];
    const { source } = await measured({ sampleRateHz: RATE_HZ, bitsPerSample: 24, channels: samples });
    for (const band of ['audible', 'ultrasonic'] as const) {
      const above = await tileOf(source, band, 1, 0, 1).catch(() => undefined);
      if (band === 'audible') expect(above).toBeUndefined();
      if (!above) continue;
      const pieces = await Promise.all([0, 1, 2, 3].map((tile) => tileOf(source, band, 0, tile, 1)));
      const columnAt = (index: number) => {
        const piece = pieces[Math.floor(index / 256)]!;
        return piece.codes.subarray((index % 256) * piece.bins, ((index % 256) + 1) * piece.bins);
      };
      for (let column = 0; column < 256; column++) {
        for (let bin = 0; bin < above.bins; bin++) {
          const finest = [0, 1, 2, 3].map((part) => columnAt(4 * column + part)[bin]!);
          expect(above.codes[column * above.bins + bin]).toBe(Math.max(...finest));
        }
      }
    }
  });

  it('put an audible tone in the audible picture, at any rate', async () => {
    for (const rateHz of [48_000, 500_000, 4_000_000]) {
      const tone = mix(sine(400_000, 10_000, rateHz, 0.1), whiteNoiseSignal(400_000, 1e-5, 3));
      const { source } = await measured({ sampleRateHz: rateHz, bitsPerSample: 24, channels: [tone] });
      const tile = await tileOf(source, 'audible', 0, 0);
      const middle = tile.codes.subarray(
        Math.floor(tile.columns / 2) * tile.bins,
        (Math.floor(tile.columns / 2) + 1) * tile.bins,
      );
      const loudest = middle.indexOf(Math.max(...middle));
      const hz = tile.lowHz + ((loudest + 0.5) * (tile.highHz - tile.lowHz)) / tile.bins;
      expect(Math.abs(hz - 10_000)).toBeLessThan(150);
      expect(Math.abs(middle[loudest]! * 0.5 - 120 + 20)).toBeLessThan(1.6);
    }
  });

  it('beyond the last, of an unknown channel or of a band that is not there are refused', async () => {
    const { source } = await measured({ sampleRateHz: 32_000, channels: [whiteNoiseSignal(50_000, 0.1, 4)] });
    await expect(tileOf(source, 'ultrasonic', 0, 0)).rejects.toThrow(NoSuchViewError);
    await expect(tileOf(source, 'audible', 0, 2)).rejects.toThrow(NoSuchViewError);
    await expect(tileOf(source, 'audible', 2, 0)).rejects.toThrow(NoSuchViewError);
    await expect(tileOf(source, 'audible', 0, 0, 1)).rejects.toThrow(NoSuchViewError);
  });
});

describe('the table of frames', () => {
  it('names definition and unit in its columns and has a row per hop, in true time', async () => {
    const tone = mix(sine(200_000, 30_000, RATE_HZ, 0.1), whiteNoiseSignal(200_000, 1e-4, 5));
    const { source } = await measured({
      sampleRateHz: RATE_HZ,
      bitsPerSample: 24,
      channels: [new Float32Array(200_000), tone],
    });
    const rows = [];
    const table = await readFrameTable(source.viewsDir, 1);
    for await (const row of table.rows) rows.push(row);
    expect(rows).toHaveLength(Math.ceil(200_000 / 1024));
    expect(rows.every((row) => row.length === table.columns.length)).toBe(true);
    const middle = rows[100]!;
    const value = (name: string) => middle[table.columns.indexOf(name)]!;
    expect(value('startSample')).toBe(100 * 1024 - 512);
    expect(value('endSample')).toBe(100 * 1024 - 512 + 2048);
    expect(value('timeS')).toBeCloseTo((100 * 1024 - 512) / RATE_HZ, 9);
    expect(value('rmsDbFs')).toBeCloseTo(-20, 1);
    expect(value('levelAbove20kHzDbFs')).toBeCloseTo(-20, 1);
    expect(value('shareAbove20kHz')).toBeGreaterThan(0.99);
    expect(Math.abs(value('zeroCrossingsPerSecond') - 60_000)).toBeLessThan(200);
  });
});
