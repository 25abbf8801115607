import { readdir } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { detectedCandidateSchema, measurementSummarySchema } from '../../../shared/contract/measurement.ts';
import { readOptions } from '../../../server/setup/measure/options.ts';
import { UsageError } from '../../../server/setup/measure/usage-error.ts';
import { fixtureBytes } from '../../support/wav/format-fixtures.ts';
import { dampedSines, lowPass, mix, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { folderWith, run } from './measure-command.ts';

const RATE_HZ = 192_000;

function clickRecording(): Uint8Array {
  const frames = 2 * RATE_HZ;
  const burst = { onsetSample: RATE_HZ, amplitude: 0.05, frequencyHz: 40_000, decayS: 0.0002 };
  const samples = mix(whiteNoiseSignal(frames, 0.001, 5), dampedSines(frames, [burst], RATE_HZ));
  return writeWav({ sampleRateHz: RATE_HZ, bitsPerSample: 24, channels: [samples] });
}

describe('the measure command', () => {
  it('tells a person what a recording shows', async () => {
    const folder = await folderWith({ 'click.wav': clickRecording() });
    const { exitCode, out, err } = await run(folder, 'click.wav');
    expect(exitCode).toBe(0);
    expect(err).toBe('');
    expect(out).toContain('24-bit integer, 1 channel, 192 kHz, 2 s');
    expect(out).toMatch(/Above 20 kHz\s+Found\./);
    expect(out).toMatch(/Candidates\s+1 \(0 below the hearing line, 0 across, 1 above\)/);
    expect(out).toMatch(/1\.00000\d/);
  });

  it('says once where the noise floor ends', async () => {
    const samples = lowPass(whiteNoiseSignal(200_000, 0.01, 7), 46_500, RATE_HZ);
    const narrow = writeWav({ sampleRateHz: RATE_HZ, bitsPerSample: 24, channels: [samples] });
    const { out } = await run(await folderWith({ 'narrow.wav': narrow }), 'narrow.wav');
    const words = out.replace(/\s+/g, ' ');
    expect(words.match(/The noise floor ends at/g)).toHaveLength(1);
    expect(words).toMatch(/Quality Nothing else stands out\. Bandwidth caution: The noise floor ends at/);
  });

  it('writes everything as JSON: the summary, the spectra and every candidate', async () => {
    const folder = await folderWith({ 'click.wav': clickRecording() });
    const { exitCode, out } = await run(folder, '--json', 'click.wav');
    expect(exitCode).toBe(0);
    const report = JSON.parse(out) as Record<string, unknown>;
    expect(report).toMatchObject({ file: 'click.wav', candidateCount: 1 });
    const summary = measurementSummarySchema.parse(report);
    expect(summary.format).toMatchObject({ sampleRateHz: RATE_HZ, channels: 1, frames: 2 * RATE_HZ });
    const [candidate] = detectedCandidateSchema.array().parse(report.candidates);
    expect(Math.abs(candidate!.onsetSample - RATE_HZ)).toBeLessThan(10);
    expect(candidate).toMatchObject({ channel: 0, hearingClass: 'above' });
    expect(report.spectra).toHaveLength(1);
  });

  it('goes on after a file that is refused, says why, and ends with code 2', async () => {
    const folder = await folderWith({ 'notes.wav': 'only words', 'click.wav': clickRecording() });
    const { exitCode, out, err } = await run(folder, '--json', 'notes.wav', 'none.wav', 'click.wav');
    expect(exitCode).toBe(2);
    expect(err).toMatch(/^notes\.wav: .+\.\nnone\.wav: There is no such file\.\n$/);
    const lines = out
      .trim()
      .split('\n')
      .map((line) => JSON.parse(line) as { file: string; refused?: string });
    expect(lines.map((line) => line.file)).toEqual(['notes.wav', 'none.wav', 'click.wav']);
    expect(lines.map((line) => line.refused !== undefined)).toEqual([true, true, false]);
  });

  it('measures FLAC and capture sets as it measures WAV', async () => {
    const folder = await folderWith({
      'blocks.flac': fixtureBytes('ff-blocks.flac'),
      'set.zip': fixtureBytes('captures.zip'),
    });
    const { exitCode, out } = await run(folder, '--json', 'blocks.flac', 'set.zip');
    expect(exitCode).toBe(0);
    const lines = out.trim().split('\n');
    const found = lines.map((line) => measurementSummarySchema.parse(JSON.parse(line)));
    const formats = found.map(({ format }) => format);
    expect(formats).toMatchObject([
      { container: 'FLAC', frames: 2300, sampleRateHz: 96_000 },
      { container: 'capture-set', frames: 480, sampleRateHz: 500_000, channels: 3 },
    ]);
    const joints = found.map(({ quality }) => quality.find(({ code }) => code === 'joints')?.count);
    expect(joints).toEqual([undefined, 1]);
  });

  it('refuses a recording with more than a trace of samples that are no numbers', async () => {
    const channels = [Float32Array.from({ length: 5000 }, (_, n) => (n < 6 ? NaN : Math.sin(n)))];
    const bytes = writeWav({ sampleRateHz: RATE_HZ, channels, encoding: 'float', bitsPerSample: 32 });
    const { exitCode, err } = await run(await folderWith({ 'nan.wav': bytes }), 'nan.wav');
    expect(exitCode).toBe(2);
    expect(err).toContain('6 of 5,000 samples are not a number or infinite');
  });

  it('says what is wrong with its command line, and explains itself', async () => {
    const folder = await folderWith({});
    expect(await run(folder)).toMatchObject({
      exitCode: 2,
      err: expect.stringContaining('No file') as string,
    });
    expect(await run(folder, '--colour', 'a.wav')).toMatchObject({ exitCode: 2 });
    expect(await run(folder, '--help')).toMatchObject({ exitCode: 0, err: '' });
  });

  it('keeps the views where it is told to, and leaves nothing elsewhere', async () => {
    const folder = await folderWith({ 'click.wav': clickRecording() });
    const before = (await readdir(tmpdir())).filter((name) => name.startsWith('recalesce-measure-'));
    await run(folder, '--views', 'kept', 'click.wav');
    expect(await readdir(join(folder, 'kept', 'click.wav'))).toContain('peaks.f32');
    const after = (await readdir(tmpdir())).filter((name) => name.startsWith('recalesce-measure-'));
    expect(after).toEqual(before);
  });
});

describe('the options of the measure command', () => {
  it('carry what is known of sensor and recorder', () => {
    const options = readOptions(
      [
        '--sensor-low-hz=1000',
        '--sensor-high-hz',
        '90000',
        '--time-expansion',
        '10',
        '--workers=1',
        'a.wav',
        '/b.wav',
      ],
      '/data',
    );
    expect(options).toMatchObject({
      isJson: false,
      workers: 1,
      files: [
        { name: 'a.wav', path: '/data/a.wav' },
        { name: '/b.wav', path: '/b.wav' },
      ],
      context: { sensorLowHz: 1000, sensorHighHz: 90_000, fullScaleV: null, timeExpansion: 10 },
    });
  });

  it('refuse numbers that cannot be', () => {
    for (const wrong of ['--time-expansion=0', '--workers=none', '--sensor-high-hz=-1', '--full-scale-v=']) {
      expect(() => readOptions([wrong, 'a.wav'], '/')).toThrow(UsageError);
    }
    expect(() => readOptions(['--sensor-low-hz=9', '--sensor-high-hz=5', 'a.wav'], '/')).toThrow(/below/);
  });
});
