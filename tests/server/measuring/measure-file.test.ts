import { readdir, readFile, truncate } from 'node:fs/promises';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { measurementSummarySchema } from '../../../shared/contract/measurement.ts';
import { measureFile } from '../../../server/measuring/measure-file.ts';
import { tileLayout } from '../../../server/measuring/view-layout.ts';
import {
  readFrameTable,
  readPeaks,
  readSpectrum,
  readTile,
  type ViewSource,
} from '../../../server/measuring/view-reader.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { measured, plainContext, storedWav } from './measured.ts';

const formats = [
  { encoding: 'integer', bitsPerSample: 8, toleranceDb: 0.1 },
  { encoding: 'integer', bitsPerSample: 16, toleranceDb: 0.001 },
  { encoding: 'integer', bitsPerSample: 24, toleranceDb: 0.0001 },
  { encoding: 'integer', bitsPerSample: 32, toleranceDb: 0.0001 },
  { encoding: 'float', bitsPerSample: 32, toleranceDb: 0.0001 },
  { encoding: 'float', bitsPerSample: 64, toleranceDb: 0.0001 },
] as const;

describe('a measured recording', () => {
  it.each(formats)('has the levels of its samples as $encoding of $bitsPerSample bits', async (format) => {
    const { summary } = await measured({
      ...format,
      sampleRateHz: 48_000,
      channels: [sine(48_000, 1000, 48_000, 0.5)],
    });
    expect(() => measurementSummarySchema.parse(summary)).not.toThrow();
    expect(Math.abs(summary.levels[0]!.rmsDb! + 6.0206)).toBeLessThan(format.toleranceDb);
    expect(Math.abs(summary.levels[0]!.peakDb! + 6.0206)).toBeLessThan(10 * format.toleranceDb);
    expect(summary.levels[0]!.crestDb).toBeCloseTo(3.01, 0);
  });

  it('shows a tone at 60 kHz as ultrasound: descriptors in hertz, course and spectrum', async () => {
    const tone = mix(sine(192_000, 60_000, 192_000, 0.1), whiteNoiseSignal(192_000, 1e-5, 1));
    const { summary, source } = await measured({
      sampleRateHz: 192_000,
      bitsPerSample: 24,
      channels: [tone],
    });
    const [found] = summary.descriptors;
    expect(found!.ultrasonicShare).toBeGreaterThan(0.999);
    expect(Math.abs(found!.centroidHz! - 60_000)).toBeLessThan(1000);
    expect(Math.abs(found!.zeroCrossingRateHz! - 120_000)).toBeLessThan(200);
    expect(summary.course.ultrasonicDb.every((level) => Math.abs(level! + 20) < 0.5)).toBe(true);
    const spectrum = await readSpectrum(source.viewsDir, 0);
    const loudest = spectrum.maximumDbPerHz.indexOf(Math.max(...spectrum.maximumDbPerHz));
    expect(spectrum.frequenciesHz[loudest]).toBe(60_000);
    // The line's density: mean square 0.005 over the window's 1.5 bins of 93.75 Hz.
    expect(spectrum.quietDbPerHz[loudest]).toBeCloseTo(10 * Math.log10(0.005 / (1.5 * 93.75)), 1);
  });

  it('has null, never NaN, for silence, and says that the channel is silent', async () => {
    const { summary, source } = await measured({
      sampleRateHz: 96_000,
      channels: [new Float32Array(50_000)],
    });
    expect(summary.levels[0]).toMatchObject({ rmsDb: null, peakDb: null, crestDb: null });
    expect(Object.values(summary.descriptors[0]!).filter((value) => value !== null)).toEqual([0]);
    expect(summary.course.levelDb.every((level) => level === null)).toBe(true);
    expect(summary.quality.map((finding) => finding.code)).toEqual(['channel-silent']);
    expect(JSON.stringify(summary)).not.toMatch(/NaN|Infinity/);
    for await (const row of (await readFrameTable(source.viewsDir, 0)).rows)
      expect(row.slice(3).every((x) => x === null)).toBe(true);
  });

  it('may be a single frame of audio', async () => {
    const { summary, source } = await measured({ sampleRateHz: 48_000, channels: [Float32Array.of(0.5)] });
    expect(summary.format.frames).toBe(1);
    expect(summary.levels[0]!.peakDb).toBeCloseTo(-6.02, 2);
    expect(() => measurementSummarySchema.parse(summary)).not.toThrow();
    const rows = [];
    const table = await readFrameTable(source.viewsDir, 0);
    for await (const row of table.rows) rows.push(row);
    expect(rows).toHaveLength(1);
  });

  it('has its last, shorter block in every figure', async () => {
    const samples = new Float32Array(300_001);
    samples[300_000] = 0.9;
    const { summary, source } = await measured({
      sampleRateHz: 48_000,
      encoding: 'float',
      bitsPerSample: 32,
      channels: [samples],
    });
    expect(summary.levels[0]!.peakDb).toBeCloseTo(20 * Math.log10(0.9), 4);
    expect(summary.course.levelDb.at(-1)).not.toBeNull();
    const rows = [];
    const table = await readFrameTable(source.viewsDir, 0);
    for await (const row of table.rows) rows.push(row);
    expect(rows.at(-1)![1]).toBe(300_001);
    expect(rows.at(-1)![table.columns.indexOf('peakDbFs')]).toBeCloseTo(20 * Math.log10(0.9), 4);
  });

  it('keeps its channels apart', async () => {
    const { summary } = await measured({
      sampleRateHz: 48_000,
      channels: [
        sine(100_000, 1000, 48_000, 0.1),
        sine(100_000, 5000, 48_000, 0.01),
        new Float32Array(100_000),
      ],
    });
    expect(summary.levels.map((level) => level.rmsDb)).toEqual([
      expect.closeTo(-20, 1),
      expect.closeTo(-40, 1),
      null,
    ]);
    expect(summary.levels.map((level) => level.channel)).toEqual([0, 1, 2]);
    expect(summary.descriptors[0]!.centroidHz).toBeLessThan(summary.descriptors[1]!.centroidHz!);
    expect(summary.quality.map((finding) => finding.code)).toEqual(['channel-silent']);
  });

  it('counts samples that are no numbers and takes them as zero', async () => {
    const samples = whiteNoiseSignal(10_000, 0.1, 2);
    samples.set([Number.NaN, Infinity, -Infinity], 500);
    const { summary } = await measured({
      sampleRateHz: 48_000,
      encoding: 'float',
      bitsPerSample: 32,
      channels: [samples],
    });
    expect(summary.levels[0]!.nonFiniteSamples).toBe(3);
    expect(summary.quality[0]).toMatchObject({ code: 'non-finite', count: 3 });
    expect(summary.levels[0]!.rmsDb).toBeCloseTo(-17, 0);
  });

  it('tells the true rate of a time-expanded file, and every frequency by it', async () => {
    const context = { ...plainContext, timeExpansion: 10 };
    const slowed = mix(sine(100_000, 15_000, 48_000, 0.1), whiteNoiseSignal(100_000, 1e-4, 3));
    const { summary } = await measured({ sampleRateHz: 48_000, channels: [slowed] }, { context });
    expect(summary.format.sampleRateHz).toBe(480_000);
    expect(summary.format.warnings.at(-1)).toMatch(/time-expanded 10 times.*480 kHz, not the 48 kHz/);
    expect(Math.abs(summary.descriptors[0]!.centroidHz! - 150_000)).toBeLessThan(15_000);
  });

  it('does not depend on which of the two equal descriptor engines ran', async () => {
    // Past 20,000 frames of 256 samples the direct engine takes over.
    const tone = mix(sine(2_600_000, 900, 8000, 0.1), whiteNoiseSignal(2_600_000, 0.01, 4));
    const long = await measured({ sampleRateHz: 8000, channels: [tone] });
    const short = await measured({ sampleRateHz: 8000, channels: [tone.subarray(0, 100_000)] });
    const manifestOf = ({ viewsDir }: ViewSource) => readFile(`${viewsDir}/views.json`, 'utf8');
    expect(await manifestOf(long.source)).toContain('"descriptors":"engine"');
    expect(await manifestOf(short.source)).toContain('"descriptors":"meyda"');
    const ratio = long.summary.descriptors[0]!.centroidHz! / short.summary.descriptors[0]!.centroidHz!;
    expect(ratio).toBeCloseTo(1, 2);
  });
});

describe('measuring', () => {
  it('gives a valid summary and readable views for any small recording', async () => {
    const rates = [1, 8, 1000, 11_025, 40_000, 44_100, 400_001, 20_000_000];
    await fc.assert(
      fc.asyncProperty(
        fc.constantFrom(...rates),
        fc.integer({ min: 1, max: 3 }),
        fc.integer({ min: 1, max: 3000 }),
        fc.constantFrom(0, 1e-6, 0.1, 5),
        async (sampleRateHz, channelCount, frames, rms) => {
          const channels = Array.from({ length: channelCount }, (_, channel) =>
            whiteNoiseSignal(frames, rms, channel),
          );
          const { summary, source } = await measured({ sampleRateHz, channels, bitsPerSample: 24 });
          expect(measurementSummarySchema.parse(JSON.parse(JSON.stringify(summary)))).toEqual(summary);
          for (const { band, levels } of tileLayout(summary.format).pictures) {
            await readTile({ ...source, channel: channelCount - 1, band, level: levels - 1, tile: 0 });
          }
          const peaks = await readPeaks({
            ...source,
            channel: 0,
            startSample: 0,
            endSample: frames,
            points: 10,
          });
          expect(peaks.minimum.length).toBeGreaterThan(0);
        },
      ),
      { numRuns: 12 },
    );
  });

  it('reports progress up to 1 and writes every view file', async () => {
    const seen: number[] = [];
    const { source } = await measured(
      { sampleRateHz: 192_000, channels: [whiteNoiseSignal(600_000, 0.1, 5)] },
      { onProgress: (fraction) => seen.push(fraction) },
    );
    expect(seen.length).toBeGreaterThan(2);
    expect(seen.at(-1)).toBe(1);
    expect(seen).toEqual([...seen].sort((a, b) => a - b));
    expect((await readdir(source.viewsDir)).sort()).toEqual([
      'audible.u8',
      'candidates.ndjson',
      'frames.f32',
      'peaks.f32',
      'spectra.json',
      'ultrasonic.u8',
      'views.json',
    ]);
  });

  it('stops when it is aborted', async () => {
    const controller = new AbortController();
    const measuring = measured(
      { sampleRateHz: 48_000, channels: [new Float32Array(600_000)] },
      { signal: controller.signal, onProgress: () => controller.abort() },
    );
    await expect(measuring).rejects.toThrow(/abort/i);
  });

  it('refuses a file that has lost its end since its header was read', async () => {
    const source = await storedWav(writeWav({ sampleRateHz: 48_000, channels: [new Float32Array(10_000)] }));
    await truncate(source.filePath, 5000);
    await expect(measureFile({ ...source, context: plainContext })).rejects.toThrow(/ends before/);
  });
});
