import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  addressNames,
  choiceWords,
  noChoice,
  readChoice,
  readRow,
  readSort,
  toFilters,
  writeChoice,
} from '@/composables/candidates/candidate-filters.ts';
import type { CandidateAddress, CandidateChoice } from '@/composables/candidates/candidate-filters.ts';

const empty = Object.fromEntries(addressNames.map((name) => [name, ''])) as CandidateAddress;
const withAddress = (part: Partial<CandidateAddress>) => ({ ...empty, ...part });

const number = (max: number) => fc.option(fc.double({ min: 0, max, noNaN: true }));
const choices: fc.Arbitrary<CandidateChoice> = fc.record({
  hearingClass: fc.option(fc.constantFrom('below', 'across', 'above', 'unknown')),
  channel: fc.option(fc.integer({ min: 0, max: 63 })),
  leastSnrDb: number(200),
  lowKHz: number(20_000),
  highKHz: number(20_000),
  fromS: number(1e6),
  toS: number(1e6),
});

describe('filters in the address', () => {
  it('come back as they were chosen', () => {
    fc.assert(
      fc.property(choices, (choice) => {
        expect(readChoice(withAddress(writeChoice(choice)))).toEqual(choice);
      }),
    );
  });

  it('leave nothing in the address where nothing is chosen', () => {
    expect(Object.values(writeChoice(noChoice)).every((text) => text === '')).toBe(true);
  });

  it('that nobody can understand count as not chosen', () => {
    const address = withAddress({
      hearing: 'loud',
      channel: '1.5',
      snr: 'many',
      low: '-3',
      high: 'NaN',
      from: 'Infinity',
      to: ' ',
    });
    expect(readChoice(address)).toEqual({ ...noChoice, toS: 0 });
  });

  it('have an order, by onset unless told otherwise, and a row that counts from 1', () => {
    expect(readSort(withAddress({}))).toBe('onset');
    expect(readSort(withAddress({ order: '-snrDb' }))).toBe('-snrDb');
    expect(readSort(withAddress({ order: 'strongest' }))).toBe('onset');
    expect(readRow(withAddress({ row: '4512' }))).toBe(4511);
    expect(readRow(withAddress({ row: '0' }))).toBeNull();
  });
});

describe('filters for the server', () => {
  it('are in hertz and samples, the window widened to whole ones', () => {
    const choice = { ...noChoice, lowKHz: 20, highKHz: 60.5, fromS: 0.00001, toS: 0.00002, channel: 1 };
    expect(toFilters(choice, 192_000)).toEqual({
      channel: 1,
      lowHz: 20_000,
      highHz: 60_500,
      startSample: 1,
      endSample: 4,
    });
  });

  it('are none where nothing is chosen', () => {
    expect(toFilters(noChoice, 48_000)).toEqual({});
  });
});

describe('filters in words', () => {
  it('say each of them', () => {
    const choice: CandidateChoice = {
      hearingClass: 'above',
      channel: 1,
      leastSnrDb: 12,
      lowKHz: 20,
      highKHz: 60,
      fromS: null,
      toS: 3.5,
    };
    expect(choiceWords(choice)).toEqual([
      'above the hearing line',
      'channel 1',
      'at least 12\u00A0dB over noise',
      'peak frequency from 20\u00A0kHz to 60\u00A0kHz',
      'in time up to 3.500\u00A0s',
    ]);
  });
});
