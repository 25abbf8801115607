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
