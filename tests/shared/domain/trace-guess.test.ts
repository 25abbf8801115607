import { readFileSync } from 'node:fs';
import { describe, expect, test } from 'vitest';
import { columnTitles, guessTraceTable } from '../../../shared/domain/trace-guess.ts';

const guess = (...lines: string[]) => guessTraceTable(lines);

describe('what a table most likely means', () => {
  test.each([
    [
      ['time (s),temperature (°C)', '0.0,4.05', '0.1,4.04'],
      { separator: 'comma', decimal: 'point', timeColumn: 0, timeUnit: 's', valueColumn: 1, unit: '°C' },
    ],
    [
      ['Zeit [ms];T [K];p [mbar]', '0;273,15;1013,2', '100;273,10;1013,3'],
      { separator: 'semicolon', decimal: 'comma', timeColumn: 0, timeUnit: 'ms', valueColumn: 1, unit: 'K' },
    ],
    [
      ['no\ttime_us\tI (mA)', '1\t0\t4.5', '2\t50\t4.6'],
      { separator: 'tab', timeColumn: 1, timeUnit: 'us', valueColumn: 2, quantity: 'current', unit: 'mA' },
    ],
    [
      ['timestamp,chamber pressure/Pa', '2026-03-02T10:00:00Z,20', '2026-03-02T10:00:01Z,21'],
      { timeColumn: 0, timeUnit: 'iso', valueColumn: 1, quantity: 'pressure', unit: 'Pa' },
    ],
    [
      ['0 20.5', '1 20.4', '2 20.4'],
      { separator: 'space', decimal: 'point', timeColumn: 0, valueColumn: 1, quantity: 'other', unit: '' },
    ],
    [['0;20', '1;21', '2;19'], { separator: 'semicolon', decimal: 'point', timeColumn: 0, valueColumn: 1 }],
    [
      ['U (V),elapsed (min),TC1 (deg C)', '2.5,0,20', '2.4,1,19'],
      { timeColumn: 1, timeUnit: 'min', valueColumn: 2, quantity: 'temperature', unit: '°C' },
    ],
  ])('%j', (lines, expected) => {
    expect(guess(...lines)).toMatchObject(expected);
  });

  test('is found under remarks, in the file of a logger', () => {
    const lines = readFileSync('fixtures/traces/logger.csv', 'utf8').split('\r\n');
    const found = guessTraceTable(lines);
    expect(found).toEqual({
      separator: 'semicolon',
      decimal: 'comma',
      timeColumn: 0,
      timeUnit: 's',
      valueColumn: 1,
      quantity: 'temperature',
      unit: '°C',
    });
    expect(columnTitles(lines, found.separator, found.decimal)).toEqual([
      'time (s)',
      'temperature (°C)',
      'pressure (hPa)',
    ]);
  });

  test('is something even where there is nothing', () => {
    expect(guess()).toMatchObject({ timeColumn: 0, valueColumn: 0 });
    expect(guess('just words', 'and more')).toMatchObject({ quantity: 'other' });
    expect(columnTitles(['1,2', '2,3'], 'comma', 'point')).toEqual(['column 1', 'column 2']);
  });
});
