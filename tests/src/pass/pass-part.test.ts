import { describe, expect, it } from 'vitest';
import {
  coverageWords,
  firstScreen,
  neighbourWindow,
  nextUnseen,
  percentWords,
  windowsWords,
} from '@/composables/pass/pass-part.ts';

const left = [
  { channel: 0, startSample: 100, endSample: 200 },
  { channel: 0, startSample: 400, endSample: 500 },
  { channel: 1, startSample: 0, endSample: 900 },
];

describe('the next part not seen', () => {
  it('is what is left from here on, then from the start, then in another channel', () => {
    expect(nextUnseen(left, 0, 150)).toEqual({ channel: 0, startSample: 150, endSample: 200 });
    expect(nextUnseen(left, 0, 200)).toEqual({ channel: 0, startSample: 400, endSample: 500 });
    expect(nextUnseen(left, 0, 600)).toEqual({ channel: 0, startSample: 100, endSample: 200 });
    expect(nextUnseen(left.slice(2), 0, 600)).toEqual(left[2]);
    expect(nextUnseen([], 0, 0)).toBeUndefined();
  });

  it('is shown no longer than a screen from which a short burst can be seen', () => {
    expect(firstScreen({ startSample: 100, endSample: 10_000 }, 1_000.5)).toEqual({
      startSample: 100,
      endSample: 1_100,
    });
    expect(firstScreen({ startSample: 100, endSample: 200 }, 1_000)).toEqual({
      startSample: 100,
      endSample: 200,
    });
  });
});

describe('windows', () => {
  const windows = [10, 40, 70].map((startSample, stratum) => ({
    startSample,
    endSample: startSample + 10,
    stratum,
  }));

  it('follow one another, from the last on to the first', () => {
    expect(neighbourWindow(windows, 15, 1)?.stratum).toBe(1);
    expect(neighbourWindow(windows, 75, 1)?.stratum).toBe(0);
    expect(neighbourWindow(windows, 45, -1)?.stratum).toBe(0);
    expect(neighbourWindow(windows, 12, -1)?.stratum).toBe(2);
  });

  it('are told by number, length and share', () => {
    const words = windowsWords({ count: 12, lengthS: 30, share: 0.1 }, (s) => `${s} s`);
    expect(words).toBe('12 windows of 30 s, 10 % of the recording');
  });
});

describe('shares', () => {
  it('never say all while something is left, nor nothing once something is there', () => {
    expect([0, 0.001, 0.5, 0.996, 1].map(percentWords)).toEqual(['0 %', '1 %', '50 %', '99 %', '100 %']);
    expect(coverageWords({ seenShare: 0.82, heardShare: 0.14 })).toBe('82 % seen, 14 % heard');
  });
});
