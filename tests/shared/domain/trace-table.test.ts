import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { TraceColumns } from '../../../shared/domain/trace-cells.ts';
import { LineCutter, TraceReader, TraceTableError } from '../../../shared/domain/trace-table.ts';

const plain: TraceColumns = {
  separator: 'comma',
  decimal: 'point',
  timeColumn: 0,
  timeUnit: 's',
  valueColumn: 1,
};

function read(text: string, columns: Partial<TraceColumns> = {}, mostRows?: number) {
  const reader = new TraceReader({ ...plain, ...columns }, mostRows);
  for (const line of text.split('\n')) reader.take(line);
  return reader.finish();
}

function refusal(text: string, columns: Partial<TraceColumns> = {}, mostRows?: number): string {
  try {
    read(text, columns, mostRows);
  } catch (error) {
    if (error instanceof TraceTableError) return error.message;
    throw error;
  }
  return 'taken';
}

describe('a table of a trace', () => {
  test('is read from its first row of numbers, times from the first row', () => {
    const trace = read('logger 7\n\ntime (s),T (°C)\n5,1.5\n6,2.5\n8,-3e-1\n');
    expect([...trace.timesS]).toEqual([0, 1, 3]);
    expect([...trace.values]).toEqual([1.5, 2.5, -0.3]);
    expect(trace).toMatchObject({ preambleLines: 3, firstInstantMs: null, notes: [] });
  });

  test.each([
    ['ms', 0.25],
    ['us', 0.000_25],
    ['min', 15_000],
  ] as const)('has times in %s', (timeUnit, seconds) => {
    expect([...read('10,1\n260,2', { timeUnit }).timesS]).toEqual([0, seconds]);
  });

  test('has instants with microseconds and zones', () => {
    const text =
      '2026-03-02T13:10:00.250001Z,1\n2026-03-02 14:10:00.250003+01:00,2\n2026-03-02T13:10:01,250001Z,3';
    const trace = read(text.replace(',250001Z', '.250001Z'), { timeUnit: 'iso' });
    expect(trace.timesS[1]).toBeCloseTo(2e-6, 12);
    expect(trace.timesS[2]).toBeCloseTo(1, 12);
    expect(trace.firstInstantMs).toBe(Date.parse('2026-03-02T13:10:00.250Z'));
  });

  test('tells no instant where the clock names no zone', () => {
    const trace = read('2026-03-02 13:10,1\n2026-03-02 13:11,2', { timeUnit: 'iso' });
    expect([...trace.timesS]).toEqual([0, 60]);
    expect(trace.firstInstantMs).toBeNull();
  });

  test('may have decimal commas, quotes and a byte order mark', () => {
    const columns = { separator: 'semicolon', decimal: 'comma' } as const;
    expect([...read('\uFEFF0;"1,5"\n0,5;"2,5"', columns).values]).toEqual([1.5, 2.5]);
    expect([...read('\u00EF\u00BB\u00BF0,1.5\n1,"2.5"').values]).toEqual([1.5, 2.5]);
    expect([...read('0,"a, b",7\n1,"c ""d""",8', { valueColumn: 2 }).values]).toEqual([7, 8]);
  });

  test('leaves rows without a value out and says so', () => {
    const trace = read('0,1\n1,\n2,OL\n3,4\n4,5\n5,6');
    expect([...trace.timesS]).toEqual([0, 3, 4, 5]);
    expect(trace.notes[0]).toBe(
      '2 rows have no number in the column of values and are left out; the first is line 2 with an empty cell.',
    );
  });

  test('tells of gaps, how long and where', () => {
    const rows = Array.from({ length: 50 }, (_, n) => `${n < 30 ? n : n + 60},1`);
    expect(read(rows.join('\n')).notes).toEqual(['There is a gap of 61 s, 29 s after the first row.']);
  });

  test('may repeat a time, as loggers with coarse clocks do', () => {
    expect([...read('0,1\n0,2\n1,3').timesS]).toEqual([0, 0, 1]);
  });
});

describe('a table that is no trace is refused in words', () => {
  test.each([
    ['time,T\nnone,none', 'No line of this table has a number in column 1 and a number in column 2.'],
    ['', 'No line of this table has a number in column 1 and a number in column 2.'],
    ['0,1\n1,2\n0.5,3', 'Line 3 goes back in time, from 1 s to 0.5 s after the first row.'],
    ['0,1,7\n1,2,7\n2;3;7', 'Line 3 has 1 cell where the lines before it have 3.'],
    ['0,1\n1,2\nend of log,', 'Line 3 has "end of log" where its time should be.'],
    ['0,1\n1,x\n2,x\n3,x', 'Column 2 holds no number in 3 of 4 rows.'],
    ['0,1', 'A trace needs at least two rows of numbers; this has one.'],
    ['5,1\n5,2', 'All rows have the same time.'],
    ['0,1\n\0\0', 'This file is no table in plain text.'],
    [`0,1\n${'7'.repeat(100_001)}`, 'This file is no table in plain text.'],
  ])('%j', (text, words) => {
    expect(refusal(text)).toContain(words);
  });

  test('decimal commas that were not expected', () => {
    expect(refusal('t;T\n0,5;21,5\n1,5;22', { separator: 'semicolon' })).toContain(
      'have decimal commas (0,5)',
    );
  });

  test('too many rows', () => {
    expect(refusal('0,1\n1,2\n2,3', {}, 2)).toBe('The table has more than 2 rows.');
  });

  test('dates that are none', () => {
    expect(refusal('2026-02-30T10:00:00Z,1', { timeUnit: 'iso' })).toContain('an ISO date and time');
  });
});

describe('tables of any kind', () => {
  const separators = fc.constantFrom(
    ['comma', ','] as const,
    ['semicolon', ';'] as const,
    ['tab', '\t'] as const,
    ['bar', '|'] as const,
    ['space', '  '] as const,
  );
  const rows = fc.array(
    fc.tuple(
      fc.integer({ min: 1, max: 1_000_000 }),
      fc.double({ min: -1e6, max: 1e6, noNaN: true }).map((value) => value + 0),
    ),
    { minLength: 2, maxLength: 60 },
  );

  test('come back as the numbers they were written from', () => {
    fc.assert(
      fc.property(separators, fc.boolean(), rows, ([separator, sign], hasCommas, steps) => {
        const decimal = hasCommas && separator !== 'comma' ? 'comma' : 'point';
        const written = (value: number) =>
          decimal === 'comma' ? String(value).replace('.', ',') : String(value);
        let timeMs = 0;
        const points = steps.map(([stepMs, value]) => [(timeMs += stepMs), value] as const);
        const text = points.map(([ms, value]) => `x${sign}${written(value)}${sign}${ms}`).join('\n');
        const trace = read(text, { separator, decimal, timeColumn: 2, valueColumn: 1, timeUnit: 'ms' });
        expect([...trace.values]).toEqual(points.map(([, value]) => value));
        expect([...trace.timesS]).toEqual(points.map(([ms]) => (ms - points[0]![0]) * 1e-3));
      }),
      { seed: 43 },
    );
  });

  test('are read or refused in words, whatever they hold', () => {
    const cell = fc.oneof(
      fc.string({ maxLength: 8 }),
      fc.double().map(String),
      fc.constantFrom('"', ',', '\0'),
    );
    const text = fc.array(fc.array(cell, { maxLength: 4 }), { maxLength: 20 });
    fc.assert(
      fc.property(text, (lines) => {
        const words = refusal(lines.map((cells) => cells.join(',')).join('\n'));
        expect(words).toMatch(/^(taken|[A-Z].*\.)$/s);
      }),
      { numRuns: 500, seed: 44 },
    );
  });

  test('are the same lines however the bytes come in pieces', () => {
    const text = readFileSync('fixtures/traces/logger.csv', 'latin1');
    const whole = text.split('\r\n').slice(0, -1);
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 1, max: 4000 }), { minLength: 1, maxLength: 40 }), (sizes) => {
        const cutter = new LineCutter();
        const lines: string[] = [];
        const take = (line: string) => lines.push(line);
        let at = 0;
        for (const size of sizes) {
          cutter.push(text.slice(at, at + size), take);
          at += size;
        }
        cutter.push(text.slice(at), take);
        cutter.finish(take);
        expect(lines).toEqual(whole);
      }),
      { numRuns: 40, seed: 45 },
    );
  });
});
