import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { afterEach, beforeEach, describe, expect, it } from 'vitest';
import { withFileSource } from '../../server/store/file-source.ts';
import { readWavHeader } from '../../shared/audio/wav-header.ts';
import { readOptions, UsageError } from '../bench/kit/options.ts';
import { alternate, medianOf, ratiosOf, spreadOf } from '../bench/kit/ratios.ts';
import { makeRecording } from '../bench/kit/recordings.ts';
import { Scene } from '../bench/kit/scene.ts';
import { tableLines } from '../bench/kit/table.ts';
import { bandwidthRow } from '../bench/rows/bandwidth.ts';
import { detectorRow } from '../bench/rows/detector.ts';

describe('figures of several runs', () => {
  it('are told by their median, which of an even number lies between the middle two', () => {
    expect(medianOf([5, 1, 3])).toBe(3);
    expect(medianOf([5, 1, 3, 100])).toBe(4);
    expect(spreadOf([5, 1, 3])).toEqual({ least: 1, median: 3, most: 5 });
  });

  it('are compared run by run, not median by median', () => {
    expect(ratiosOf([1, 20, 3], [1, 10, 1]).median).toBe(2);
  });

  it('come in turns, the order reversed every other time', async () => {
    const order: string[] = [];
    const run = (name: string) => async () => order.push(name);
    const results = await alternate(3, { a: run('a'), b: run('b') });
    expect(order.join('')).toBe('abbaab');
    expect(results).toEqual({ a: [1, 4, 5], b: [2, 3, 6] });
  });
});

describe('the command line of the bench', () => {
  it('names rows and asks for a quick look', () => {
    const options = readOptions(['--quick', 'memory'], ['memory', 'growth']);
    expect(options).toEqual({ isQuick: true, isJson: false, isHelp: false, names: ['memory'] });
  });

  it('is refused with the known rows where it names another', () => {
    expect(() => readOptions(['speed'], ['memory', 'growth'])).toThrow(UsageError);
    expect(() => readOptions(['speed'], ['memory', 'growth'])).toThrow(/named speed.*memory, growth/);
  });
});

describe('the table of the bench', () => {
  it('says of each row whether it holds, and nothing where nothing is asked for', () => {
    const [title, , ...rows] = tableLines([
      { what: 'size', ours: '7 %', must: '12 %', holds: true },
      { what: 'time', ours: '3 s', must: '2 s', holds: false },
      { what: 'length', ours: '4 m' },
    ]);
    expect(title).toMatch(/^what +ours +peer +ratio +must +reachable$/);
    expect(rows.map((row) => row.split(/\s{2,}/).at(-1))).toEqual(['holds', 'MISSED', '4 m']);
    expect(rows[0]!.indexOf('7 %')).toBe(rows[1]!.indexOf('3 s'));
  });
});

describe('what the benchmarks of the detector print', () => {
  const figures = (recall: string, precision: string, onsetUs: string) =>
    `n 104  recall ${recall}  precision ${precision}  onset ${onsetUs} us   9.2 Msamples per CPU second`;

  it('is held against what is asked for at that distance from the noise', () => {
    const strong = '192 kHz, 25-76.8 kHz, 15-60 cycles, 15-15 dB ';
    const row = detectorRow(strong + figures('0.990', '1.000', '34.0'));
    expect(row).toMatchObject({
      what: strong.trim(),
      must: 'recall 0.98, precision 0.98, 50 us',
      holds: true,
    });
    expect(detectorRow(strong + figures('0.970', '1.000', '34.0')).holds).toBe(false);
    expect(detectorRow(strong + figures('0.990', '1.000', '51.0')).holds).toBe(false);
    const weak = '192 kHz, 4-16 kHz, 60-200 cycles, 5-5 dB     ';
    expect(detectorRow(weak + figures('0.662', '0.832', '145.8')).holds).toBe(false);
    expect(detectorRow(weak + figures('0.662', '0.932', '145.8')).holds).toBe(true);
  });

  it('is held against finer onsets at half a megahertz', () => {
    const line = `500 kHz, 4-16 kHz, 15-60 cycles, 15-40 dB    ${figures('1.000', '1.000', '34.0')}`;
    expect(detectorRow(line)).toMatchObject({ must: 'recall 0.98, precision 0.98, 20 us', holds: false });
  });

  it('is held against recall alone where two clicks overlap, and against chance in noise alone', () => {
    const pair = `48 kHz, 4-16 kHz, two clicks 1-3 ms apart    ${figures('0.921', '0.500', '400')}`;
    expect(detectorRow(pair)).toMatchObject({ must: 'recall 0.9', holds: true });
    const alone =
      '48 kHz, hum and noise alone                  3 candidates in 600 s   16.2 Msamples per CPU second';
    expect(detectorRow(alone)).toMatchObject({ what: '48 kHz, hum and noise alone', holds: false });
    expect(detectorRow(alone.replace('3 candidates', '2 candidates')).holds).toBe(true);
  });

  it('says how far the bandwidth of a file is from where it ends', () => {
    const line =
      'aac 128 kbit/s                     found none        22050 Hz, expected  21735 Hz, error    315 Hz';
    expect(bandwidthRow(line)).toMatchObject({
      what: 'effective bandwidth: aac 128 kbit/s',
      ours: 'found none 22050 Hz, expected 21735 Hz, error 315 Hz',
      holds: true,
    });
    expect(bandwidthRow(line.replace(' 315', '-1315')).holds).toBe(false);
  });
});

describe('inputs of the bench', () => {
  let folder: string;

  beforeEach(() => {
    folder = mkdtempSync(path.join(tmpdir(), 'recalesce-bench-test-'));
  });

  afterEach(() => {
    rmSync(folder, { recursive: true, force: true });
  });

  it('are the same in pieces of any length', () => {
    const whole = new Float32Array(60_000);
    new Scene(48_000, 3).next(whole);
    const scene = new Scene(48_000, 3);
    let from = 0;
    for (const length of [1, 999, 20_000, 39_000]) {
      const piece = new Float32Array(length);
      scene.next(piece);
      for (let i = 0; i < length; i += 37) expect(piece[i]).toBeCloseTo(whole[from + i]!, 6);
      from += length;
    }
    expect(from).toBe(whole.length);
  });

  it('are WAV files of the wanted form, made once', async () => {
    const said: string[] = [];
    const bench = { isQuick: true, pairs: 1, folder, say: (line: string) => said.push(line) };
    const layout = { encoding: 'integer', bitsPerSample: 24, channels: 2 } as const;
    const spec = { ...layout, sampleRateHz: 96_000, frames: 30_000, holeFrames: 10_000 };
    const made = makeRecording(bench, spec);
    expect(makeRecording(bench, spec)).toEqual(made);
    expect(said).toHaveLength(1);
    const { format } = await withFileSource(made.path, readWavHeader);
    expect(format).toMatchObject({ ...layout, sampleRateHz: 96_000, frames: 30_000, warnings: [] });
  });
});
