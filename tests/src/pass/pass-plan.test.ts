import { describe, expect, it } from 'vitest';
import { isOverdue, kindWords, minutesWords } from '@/components/bench/pass-words.ts';
import { minutesOf, orderWords, windowsOrder } from '@/composables/pass/pass-plan.ts';

const anHour = { frames: 3600 * 96_000, sampleRateHz: 96_000, channels: 1, candidateCount: 400 };

describe('planning a pass', () => {
  it('turns a share into a number of windows, and tells before what will be drawn', () => {
    const order = windowsOrder({ lengthS: 30, share: '0.1', count: null }, anHour);
    expect(order).toEqual({ count: 12, lengthS: 30 });
    expect(orderWords(order, anHour)).toMatch(/^12 windows of 30\u00A0s, 10 % of the recording\./);
  });

  it('asks for what is missing, and says why something cannot be drawn', () => {
    expect(windowsOrder({ lengthS: null, share: '0.1', count: 3 }, anHour)).toBeNull();
    expect(windowsOrder({ lengthS: 30, share: 'number', count: null }, anHour)).toBeNull();
    expect(orderWords(null, anHour)).toBe('Number and length are needed.');
    expect(orderWords({ count: 3, lengthS: 2000 }, anHour)).toMatch(/^This cannot be drawn: .* do not fit/);
  });

  it('tells the likely minutes, which hang on candidates in rounds alone', () => {
    const whole = { task: 'events', kind: 'whole', windows: null } as const;
    expect(minutesOf(whole, anHour)).toBe(26);
    expect(minutesOf(whole, { ...anHour, candidateCount: 90_000 })).toBe(26);
    expect(minutesOf({ ...whole, kind: 'windows', windows: { count: 12, lengthS: 30 } }, anHour)).toBe(5);
    expect(minutesOf({ ...whole, kind: 'rounds' }, anHour)).toBe(21);
    expect(minutesOf({ ...whole, kind: 'rounds' }, { ...anHour, candidateCount: null })).toBeNull();
  });
});

describe('words of a pass', () => {
  it('name its kind', () => {
    const pass = { task: 'events', kind: 'whole', windows: null, blind: true } as const;
    expect(kindWords(pass)).toBe('whole recording, blind');
    expect(kindWords({ ...pass, blind: false })).toBe('whole recording, candidates shown');
    expect(kindWords({ ...pass, kind: 'rounds', blind: false })).toBe('rounds of candidates');
    expect(kindWords({ ...pass, task: 'phases' })).toBe('growth phases, without the sound, blind');
    const windows = [{ startSample: 0, endSample: 1, stratum: 0 }];
    expect(kindWords({ ...pass, kind: 'windows', windows })).toBe('1\u00A0window, blind');
  });

  it('round minutes to what one can know', () => {
    expect([null, 14, 89, 130, 177, 240].map(minutesWords)).toEqual([
      null,
      'about 14 min',
      'about 89 min',
      'about 2 h 10 min',
      'about 3 h',
      'about 4 h',
    ]);
  });

  it('call overdue what is open after its due date', () => {
    const due = { state: 'assigned', dueAt: '2026-01-01T00:00:00.000Z' } as const;
    const after = Date.parse('2026-01-02T00:00:00.000Z');
    expect(isOverdue(due, after)).toBe(true);
    expect(isOverdue({ ...due, state: 'finished' }, after)).toBe(false);
    expect(isOverdue({ ...due, dueAt: null }, after)).toBe(false);
    expect(isOverdue(due, after - 172_800_000)).toBe(false);
  });
});
