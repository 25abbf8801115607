import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { bytesSource } from '../../../shared/audio/byte-source.ts';
import { readCsvFile } from '../../../shared/audio/csv-file.ts';
import type { StoredCsvLayout } from '../../../shared/audio/declared-layout.ts';
import { personalMetadata } from '../../../shared/audio/personal-metadata.ts';
import { importFolder } from './imported.ts';

const { bring } = importFolder();
const trace = readFileSync('fixtures/ae-sensor/AE_frontcenter_S100V.csv');

function layoutOf(facts: Partial<StoredCsvLayout> = {}): StoredCsvLayout {
  return {
    kind: 'CSV',
    timeColumn: null,
    timeUnit: 's',
    sampleRateHz: 1000,
    valueColumns: [0],
    unit: 'full-scale',
    fullScaleV: null,
    ...facts,
  };
}

const timed: Partial<StoredCsvLayout> = { timeColumn: 0, sampleRateHz: null, valueColumns: [1] };
const bringText = (text: string, facts: Partial<StoredCsvLayout> = {}) =>
  bring(Buffer.from(text, 'latin1'), { layout: layoutOf(facts) });
const valuesOf = async (text: string, facts: Partial<StoredCsvLayout> = {}) =>
  (await bringText(text, facts)).samples.map((channel) => [...channel]);

describe('a table of numbers', () => {
  it('of a sensor trace in volts gives its rate from its times and its samples over full scale', async () => {
    const { format, samples } = await bring(trace, {
      layout: layoutOf({ ...timed, unit: 'V', fullScaleV: 5 }),
    });
    // fixtures/ae-sensor/README.md: 15,360 samples at 10 MHz, peak 4.26 V.
    expect(format).toMatchObject({
      container: 'CSV',
      frames: 15_360,
      sampleRateHz: 10_000_000,
      warnings: [],
    });
    expect(Math.max(...samples[0]!.map(Math.abs)) * 5).toBeCloseTo(4.26, 2);
    const words = trace.toString().split('\n');
    expect(samples[0]![7]).toBe(Math.fround(Number(words[8]!.split(',')[1]) / 5));
  });

  it.each([
    ['commas', '0.25,1\n-0.5,2\n'],
    ['semicolons', '0.25;1\n-0.5;2\n'],
    ['tabs', '0.25\t1\n-0.5\t2\n'],
    ['bars', '0.25|1\n-0.5|2\n'],
    ['spaces', '  0.25   1\n  -0.5   2\n'],
    ['Windows line ends', '0.25,1\r\n-0.5,2\r\n'],
    ['quoted cells', '"0.25","1"\n"-0.5","2"\n'],
    ['no line end at the end', '0.25,1\n-0.5,2'],
    ['blank lines at the end', '0.25,1\n-0.5,2\n\n \r\n'],
    ['lines of words above', 'Made by a digitizer\nchannel,gain\n\n0.25,1\n-0.5,2\n'],
    ['powers of ten', '2.5e-1,1\n-5E-1,2\n'],
  ])('is read with %s', async (_, text) => {
    expect(await valuesOf(text)).toEqual([[0.25, -0.5]]);
  });

  it('gives each declared column a channel, in their order', async () => {
    expect(await valuesOf('n,a,b\n0,0.1,0.5\n1,0.2,0.25\n', { valueColumns: [2, 1] })).toEqual([
      [0.5, 0.25],
      [Math.fround(0.1), Math.fround(0.2)],
    ]);
  });

  it.each([
    ['ms', '0,0\n0.1,0\n0.2,0\n', 10_000],
    ['us', '-5,0\n-4.5,0\n-4,0\n', 2_000_000],
    ['ns', '0,0\n100,0\n200,0\n', 10_000_000],
    ['s', '0,0\n0.00001,0\n0.00002,0\n0.00003,0\n', 100_000],
  ] as const)('finds the rate from times in %s', async (timeUnit, text, sampleRateHz) => {
    const { format } = await bringText(text, { ...timed, timeUnit });
    expect(format.sampleRateHz).toBe(sampleRateHz);
  });

  it('with a rate that is no whole number of hertz is told, and long tables stay even', async () => {
    const rows = Array.from({ length: 30_000 }, (_, n) => `${(n * 0.3).toFixed(4)},0.5`);
    const { format } = await bringText(rows.join('\n'), { ...timed, timeUnit: 'ms' });
    expect(format).toMatchObject({ sampleRateHz: 3333, frames: 30_000 });
    expect(format.warnings).toEqual([
      'The times of the table make 3333.3333 samples per second; 3333 were taken.',
    ]);
  });

  it.each([
    ['V', 0.5],
    ['mV', 0.0005],
    ['uV', 0.0000005],
  ] as const)('in %s is divided by the volts at full scale', async (unit, expected) => {
    expect(await valuesOf('1\n1\n', { unit, fullScaleV: 2 })).toEqual([
      [Math.fround(expected), Math.fround(expected)],
    ]);
  });

  it('past full scale keeps its values and is told', async () => {
    const { format, wav } = await bringText('0.5\n-3\n', { unit: 'V', fullScaleV: 2 });
    expect(format.warnings).toEqual(['The largest value is 3 V, above the full scale of 2 V.']);
    expect(wav.format.bitsPerSample).toBe(64);
  });

  it('with empty cells and nan has samples that are no numbers, which measuring counts', async () => {
    const { format, samples } = await bringText('1,0.5\n2,\n3,nan\n4,0.25\n', { valueColumns: [1] });
    expect(format.frames).toBe(4);
    expect([...samples[0]!]).toEqual([0.5, 0, 0, 0.25]);
  });

  it('of many rows in blocks comes out whole', async () => {
    const codes = Array.from({ length: 20_001 }, (_, n) => (n % 1000) / 1000);
    expect(await valuesOf(codes.join('\n'))).toEqual([codes.map(Math.fround)]);
  });
});

describe('a table that cannot be taken', () => {
  it.each<[string, string, Partial<StoredCsvLayout>, string]>([
    ['decimal commas', 't;U\n0,0;0,1\n0,1;0,2\n', timed, 'The numbers of this table have decimal commas'],
    ['decimal commas and tabs', '0,0\t0,1\n', timed, 'The numbers of this table have decimal commas'],
    ['too few columns', '1,2\n3,4\n', { valueColumns: [2] }, 'in each of the declared columns (2, counted'],
    ['words alone', 'a,b\nc,d\n', {}, 'No line of this table has a number'],
    ['times that stand still', '0,1\n0,2\n', timed, 'give no sample rate'],
    ['times that go back', '0,1\n2,1\n1,1\n', timed, 'Line 2 of the table leaves the even steps'],
    [
      'a gap in its times',
      '0,1\n1,1\n2,1\n9,1\n10,1\n',
      { ...timed, timeUnit: 'ms' },
      'leaves the even steps',
    ],
    ['a word among its numbers', '1\n2\nx\n4\n', {}, 'Line 3 of the table does not hold a number'],
    ['a missing cell', '1,2\n3\n5,6\n', { valueColumns: [1] }, 'Line 2 of the table does not hold'],
    ['an empty line among its numbers', '1\n\n3\n', {}, 'Line 3 of the table follows an empty line'],
  ])('for %s is refused with a sentence', async (_, text, facts, words) => {
    const refused: unknown = await bringText(text, facts).catch((error: unknown) => error);
    expect(refused).toMatchObject({ name: 'RefusedFileError' });
    expect((refused as Error).message).toContain(words);
    expect((refused as Error).message).toMatch(/^[A-Z].*\.$/);
  });

  it('is no text at all', async () => {
    await expect(bring(Buffer.from([49, 0, 10, 0, 50, 0]), { layout: layoutOf() })).rejects.toThrow(
      'This file is no table in plain text.',
    );
  });
});

describe('the lines above the numbers', () => {
  const findingsOf = async (text: string) => {
    const { metadata } = await readCsvFile(bytesSource(Buffer.from(text)), layoutOf(timed));
    return personalMetadata(metadata).map(({ key, kind }) => [key, kind]);
  };

  it('are held against the privacy screen', async () => {
    const text =
      'Operator,A. Person\nLocation: basement\nrate 1000\nfroze over night again\ntime,volts\n0,0\n1,0\n';
    expect(await findingsOf(text)).toEqual([
      ['line 1', 'person'],
      ['line 2', 'place'],
      ['line 4', 'free-text'],
    ]);
  });

  it('raise nothing where they are titles of columns', async () => {
    expect(await findingsOf('time stamp,volts of sensor\n0,0\n1,0\n')).toEqual([]);
  });
});
