import { describe, expect, test } from 'vitest';
import { likelyMinutes, type EffortFacts } from '../../../shared/domain/pass-effort.ts';

const facts: EffortFacts = {
  task: 'events',
  kind: 'whole',
  partS: 3600,
  channels: 1,
  windows: 0,
  candidates: null,
};

describe('likely minutes', () => {
  test('of a whole recording come from the screens at the zoom that counts: 300 for an hour, 5 s each', () => {
    expect(likelyMinutes(facts)).toBe(26);
    expect(likelyMinutes({ ...facts, channels: 2 })).toBe(51);
    expect(likelyMinutes({ ...facts, partS: 0.5 })).toBe(1);
  });

  test('of windows come from their length and their number', () => {
    // 12 windows of 30 s: 3 screens of 12 s each.
    expect(likelyMinutes({ ...facts, kind: 'windows', partS: 360, windows: 12 })).toBe(5);
  });

  test('do not hang on candidates unless candidates are what is offered', () => {
    expect(likelyMinutes({ ...facts, candidates: 90_000 })).toBe(likelyMinutes(facts));
    const windows = { ...facts, kind: 'windows' as const, windows: 12, partS: 360 };
    expect(likelyMinutes({ ...windows, candidates: 90_000 })).toBe(likelyMinutes(windows));
  });

  test('of rounds are twenty candidates a minute, and unknown with their number', () => {
    expect(likelyMinutes({ ...facts, kind: 'rounds', candidates: 400 })).toBe(21);
    expect(likelyMinutes({ ...facts, kind: 'rounds' })).toBeNull();
  });

  test('of growth phases come from watching the run', () => {
    expect(likelyMinutes({ ...facts, task: 'phases', partS: 600 })).toBe(16);
  });
});
