import { describe, expect, it } from 'vitest';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { measurementSummarySchema, type MeasurementSummary } from '../../../shared/contract/measurement.ts';
import { readOptions } from '../../../server/setup/measure/options.ts';
import { UsageError } from '../../../server/setup/measure/usage-error.ts';
import { dampedSines, mix, whiteNoiseSignal } from '../../support/wav/signals.ts';
import { writeWav } from '../../support/wav/write-wav.ts';
import { folderWith, run } from './measure-command.ts';

const RATE_HZ = 192_000;
const FRAMES = 96_000;
const bursts = [{ onsetSample: 70_000, amplitude: 0.2, frequencyHz: 40_000, decayS: 0.0002 }];
const left = mix(whiteNoiseSignal(FRAMES, 0.001, 3), dampedSines(FRAMES, bursts, RATE_HZ));
const right = whiteNoiseSignal(FRAMES, 0.002, 4);
const wav = writeWav({ sampleRateHz: RATE_HZ, bitsPerSample: 24, channels: [left, right] });

async function samplesOfWav(): Promise<Buffer> {
  const { dataOffset, dataBytes } = await readWavHeader(bytesSource(wav));
  return Buffer.from(wav.subarray(dataOffset, dataOffset + dataBytes));
}

/** Everything but where the samples came from. */
function figures({ format: _, ...rest }: MeasurementSummary): object {
  return rest;
}

function summaries(out: string): MeasurementSummary[] {
  const lines = out.trim().split('\n');
  return lines.map((line) => measurementSummarySchema.parse(JSON.parse(line)));
}

const rawOptions = ['--channels=2', '--sample-rate-hz=192000'];

describe('raw samples with a declared layout', () => {
  it('give the figures of the same samples as WAV, behind a header or with the bytes the other way round', async () => {
    const samples = await samplesOfWav();
    const turned = Buffer.from(samples);
    for (let at = 0; at < turned.length; at += 3) turned.subarray(at, at + 3).reverse();
    const folder = await folderWith({
      'a.wav': wav,
      'little.bin': Buffer.concat([Buffer.alloc(37, 7), samples]),
      'big.bin': turned,
    });
    const [expected] = summaries((await run(folder, '--json', 'a.wav')).out);
    const little = await run(folder, '--json', '--raw=s24le', '--skip-bytes=37', ...rawOptions, 'little.bin');
    const big = await run(folder, '--json', '--raw=s24be', ...rawOptions, 'big.bin');
    for (const [found] of [summaries(little.out), summaries(big.out)]) {
      expect(found!.format).toMatchObject({
        ...{ container: 'raw', channels: 2, frames: FRAMES, sampleRateHz: RATE_HZ, bitsPerSample: 24 },
      });
      expect(figures(found!)).toEqual(figures(expected!));
    }
    expect(expected!.ultrasonic.candidates.total).toBe(1);
  });

  it('that are no whole number of frames are refused with a sentence', async () => {
    const folder = await folderWith({ 'a.bin': new Uint8Array(1001) });
    const { exitCode, err } = await run(folder, '--raw=s16le', ...rawOptions, 'a.bin');
    expect(exitCode).toBe(2);
    expect(err).toMatch(/^a\.bin: The file has 1,001 bytes .+ 1 are left over\. .+\.\n$/);
  });

  it('are not taken of a file that has a header', async () => {
    const { exitCode, err } = await run(
      await folderWith({ 'a.wav': wav }),
      '--raw=s24le',
      ...rawOptions,
      'a.wav',
    );
    expect(exitCode).toBe(2);
    expect(err).toContain('This is a WAV file, which says itself how its samples lie.');
  });
});

describe('a table of numbers with declared columns', () => {
  it('is taken with its times, in parts of the volts that full scale is', async () => {
    const rows = Array.from({ length: 4000 }, (_, n) => `${n * 5};${200 * Math.sin(n)};x;${n % 2}`);
    const folder = await folderWith({ 'a.csv': ['us;mV;;V', ...rows].join('\n') });
    const options = ['--csv=1', '--csv-time=0', '--csv-time-unit=us', '--csv-unit=mV', '--full-scale-v=2'];
    const { exitCode, out, err } = await run(folder, '--json', ...options, 'a.csv');
    expect([exitCode, err]).toEqual([0, '']);
    const [{ format, levels }] = summaries(out) as [MeasurementSummary];
    expect(format).toMatchObject({ container: 'CSV', channels: 1, frames: 4000, sampleRateHz: 200_000 });
    // A sine of 0.2 V at a full scale of 2 V: -20 dB by AES17.
    expect(levels[0]!.rmsDb).toBeCloseTo(-20, 1);
  });

  it('whose columns hold no numbers is refused with a sentence', async () => {
    const folder = await folderWith({ 'a.csv': 'time,level\n0,low\n1,high\n' });
    const options = ['--csv=1', '--csv-unit=full-scale', '--sample-rate-hz=1000'];
    const { exitCode, err } = await run(folder, ...options, 'a.csv');
    expect(exitCode).toBe(2);
    expect(err).toMatch(/^a\.csv: No line of this table has a number .+\.\n$/);
  });
});

describe('the options that declare a layout', () => {
  it('become the layout that the server takes', () => {
    const raw = readOptions(['--raw=f32be', '--channels=3', '--sample-rate-hz=5000000', 'a'], '/');
    expect(raw!.layout).toEqual({
      ...{ kind: 'raw', encoding: 'float', bitsPerSample: 32, byteOrder: 'big' },
      ...{ channels: 3, sampleRateHz: 5_000_000, headerBytes: 0 },
    });
    const csv = readOptions(['--csv=2,0', '--csv-unit=full-scale', '--sample-rate-hz=8000', 'a'], '/');
    expect(csv!.layout).toEqual({
      ...{ kind: 'CSV', timeColumn: null, timeUnit: 's', sampleRateHz: 8000 },
      ...{ valueColumns: [2, 0], unit: 'full-scale', fullScaleV: null },
    });
    expect(readOptions(['a'], '/')!.layout).toBeNull();
  });

  const rate = '--sample-rate-hz=8000';
  it.each<[string[], RegExp]>([
    [['--raw=s12le', '--channels=1', rate], /^--raw s12le: that encoding is not known/],
    [['--raw=f16le', '--channels=1', rate], /encoding is not known/],
    [['--raw=s16', '--channels=1', rate], /encoding is not known/],
    [['--raw=s16le', rate], /^--channels is needed with --raw\.$/],
    [['--raw=s16le', '--channels=65', rate], /^--channels 65: it is at most 64\.$/],
    [['--raw=s16le', '--channels=', rate], /^--channels : that is not possible here\.$/],
    [['--raw=s16le', '--channels=1'], /^--sample-rate-hz is needed with --raw\.$/],
    [['--raw=s16le', '--channels=1', '--sample-rate-hz=2.5'], /it is a whole number of hertz\.$/],
    [
      ['--raw=s16le', '--channels=1', rate, '--skip-bytes=-1'],
      /^--skip-bytes -1: that is not possible here\.$/,
    ],
    [['--raw=s16le', '--csv=1'], /cannot both/],
    [['--raw=s16le', '--csv-time=1'], /^--csv-time says something only with --csv\.$/],
    [['--channels=2'], /^--channels says something only with --raw\.$/],
    [[rate], /^--sample-rate-hz says something only with --raw or --csv\.$/],
    [['--csv=1', rate], /^--csv-unit is needed with --csv\.$/],
    [['--csv=1', '--csv-unit=V', rate], /^--csv-unit V needs --full-scale-v/],
    [['--csv=1', '--csv-unit=kV', rate], /^--csv-unit kV: that is not possible here\.$/],
    [['--csv=1', '--csv-unit=full-scale'], /needed with --csv where --csv-time names no column/],
    [['--csv=1', '--csv-unit=full-scale', '--csv-time=0', rate], /^--sample-rate-hz 8000: it is told where/],
    [['--csv=1,1', '--csv-unit=full-scale', rate], /^--csv 1,1: it holds a column twice/],
    [['--csv=a', '--csv-unit=full-scale', rate], /^--csv a: that is not possible here\.$/],
  ])('refuse %j', (argumentList, sentence) => {
    const read = () => readOptions([...argumentList, 'a'], '/');
    expect(read).toThrow(UsageError);
    expect(read).toThrow(sentence);
  });
});
