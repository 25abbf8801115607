import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { Candidate } from '@shared/contract/candidates.ts';
import type { RoundGroup, RoundItem } from '@shared/contract/rounds.ts';
import { afterAnswer, FRESH, minutesLeft, REST_AFTER_MS, rested } from '@/composables/rounds/round-pace.ts';
import { afterChange, answeredCount } from '@/composables/rounds/round-steps.ts';
import type { Said } from '@/composables/rounds/round-steps.ts';
import { playSpanOf, slowOf, windowOf } from '@/composables/rounds/round-view.ts';
import { progressWords, sayingWords, tallyWords } from '@/composables/rounds/round-words.ts';
import { groupSentence } from '@/composables/rounds/group-words.ts';
import { describe as describeGroup } from '@/composables/rounds/useLookAlikes.ts';

const burst = {
  onsetSample: 50_000,
  endSample: 50_300,
  peakFrequencyHz: 150_000,
  bandLowHz: 1e5,
  bandHighHz: 2e5,
};
const noEvent: Said = { verdict: 'no-event', classKey: null, confidence: null };
const crack: Said = { verdict: 'event', classKey: 'crack', confidence: 'sure' };

describe('how a candidate is shown', () => {
  test('the burst takes a third of the width and lies inside it', () => {
    fc.assert(
      fc.property(
        fc.integer({ min: 0, max: 999_000 }),
        fc.integer({ min: 200, max: 30_000 }),
        (onset, length) => {
          const endSample = Math.min(1_000_000, onset + length);
          const span = { ...burst, onsetSample: onset, endSample };
          const shown = windowOf(span, 1_000_000);
          const samples = shown.endSample - shown.startSample;
          expect(shown.startSample).toBeLessThanOrEqual(onset);
          expect(shown.endSample).toBeGreaterThanOrEqual(endSample);
          expect((endSample - onset) / samples).toBeLessThanOrEqual(1 / 3 + 1e-9);
          if (endSample - onset >= 200)
            expect(samples).toBeCloseTo(Math.max(384, 3 * (endSample - onset)), 3);
        },
      ),
    );
  });

  test.each([
    [150_000, 50],
    [40_000, 10],
    [20_100, 5],
    [20_000, 1],
    [12_000, 1],
    [3_000, 1],
    [900_000, 100],
  ])(
    'a burst of %d Hz is slowed %d times: as recorded where people hear it, else to where they hear well',
    (peakFrequencyHz, slow) => {
      expect(slowOf({ ...burst, peakFrequencyHz })).toBe(slow);
    },
  );

  test('it is slowed by its band where no peak is known', () => {
    expect(slowOf({ ...burst, peakFrequencyHz: null })).toBe(50);
  });

  test('what is played holds the burst and lasts 0.7 s, slowed', () => {
    const span = playSpanOf(burst, { frames: 10_000_000, sampleRateHz: 1_000_000, slow: 50 });
    expect(span.endSample - span.startSample).toBe(14_000);
    expect(span.startSample).toBeLessThan(burst.onsetSample);
    const atStart = playSpanOf(
      { ...burst, onsetSample: 10, endSample: 60 },
      { frames: 900, sampleRateHz: 1e6, slow: 1 },
    );
    expect(atStart).toEqual({ startSample: 0, endSample: 900 });
  });
});

describe('the own pace', () => {
  const answers = (tookMs: number[]) =>
    tookMs.reduce((pace, one, index) => afterAnswer(pace, { atMs: 10_000 * index, tookMs: one }), FRESH);

  test('tells the minutes left by the median, once there are three answers', () => {
    expect(minutesLeft(answers([4000, 4000]), 156)).toBeNull();
    expect(minutesLeft(answers([4000, 60_000, 5000, 4600, 4000]), 156)).toBe(12);
    expect(minutesLeft(answers([4000, 4000, 4000]), 1)).toBe(1);
  });

  test('counts no pause, neither as pace nor as work', () => {
    const lunch = afterAnswer(answers([2000, 2000, 2000]), { atMs: 4_000_000, tookMs: 3_900_000 });
    expect(minutesLeft(lunch, 30)).toBe(1);
    expect(lunch.workedMs).toBe(0);
  });

  test('asks for a rest after 25 minutes of answering, and again 25 minutes after it', () => {
    const work = (from: typeof FRESH, minutes: number) => {
      let pace = from;
      const startMs = pace.lastAtMs ?? 0;
      for (let n = 1; n <= 6 * minutes; n++)
        pace = afterAnswer(pace, { atMs: startMs + 10_000 * n, tookMs: 9000 });
      return pace;
    };
    const tired = work(FRESH, 26);
    expect(work(FRESH, 24).workedMs).toBeLessThan(REST_AFTER_MS);
    expect(tired.workedMs).toBeGreaterThanOrEqual(REST_AFTER_MS);
    expect(work(rested(tired), 24).workedMs).toBeLessThan(REST_AFTER_MS);
  });
});

describe('the words of a round', () => {
  const progress = { candidates: 214, events: 30, noEvents: 26, undecided: 2 };
  const classes = [{ key: 'crack', title: 'crack', definition: '', confusedWith: '', glyph: 'x' }];

  test('say how far it is and how long it takes', () => {
    expect(progressWords(progress, 12)).toBe(
      '58 of 214 answered, about 12\u00A0minutes left by your own pace',
    );
    expect(progressWords(progress, null)).toBe('58 of 214 answered');
    expect(progressWords({ ...progress, candidates: 58 }, 1)).toBe('58 of 58 answered');
    expect(tallyWords(progress)).toBe('30\u00A0events, 26 no event, 2 undecided');
  });

  test('name an answer', () => {
    expect(sayingWords(crack, classes)).toBe('crack');
    expect(sayingWords({ ...crack, confidence: 'probable' }, classes)).toBe('crack, probable');
    expect(sayingWords(noEvent, classes)).toBe('no event');
    expect(sayingWords(null, classes)).toBe('not answered');
  });

  test('count each answer once, however it is changed', () => {
    const one = afterChange(progress, null, crack);
    expect(answeredCount(one)).toBe(59);
    expect(afterChange(one, crack, noEvent)).toMatchObject({ events: 30, noEvents: 27 });
    expect(afterChange(one, crack, null)).toEqual(progress);
  });
});

describe('a group of look-alikes', () => {
  const group: RoundGroup = { key: 'a', number: 1, groups: 3, size: 6, firstRank: 10, spotChecks: 2 };
  const items = new Map(
    Array.from({ length: 6 }, (_value, index): [number, RoundItem] => [
      10 + index,
      {
        rank: 10 + index,
        candidate: { id: `c${index}` } as Candidate,
        isDrawn: false,
        groupKey: 'a',
        answer: null,
      },
    ]),
  );
  const state = (said: [string, Said][]) => describeGroup(group, items, new Map(said));

  test('is answered at once only after its example and spot checks agree', () => {
    expect(state([]).state).toBe('checking');
    expect(
      state([
        ['c0', crack],
        ['c1', crack],
      ]).state,
    ).toBe('checking');
    const ready = state([
      ['c0', crack],
      ['c1', crack],
      ['c2', crack],
    ]);
    expect(ready.state).toBe('ready');
    expect(ready.agreed).toEqual(crack);
    expect(ready.rest.map(({ rank }) => rank)).toEqual([13, 14, 15]);
  });

  test('is answered one by one where the spot checks differ, in class or in confidence', () => {
    const less: Said = { ...crack, confidence: 'probable' };
    for (const other of [noEvent, less]) {
      const found = state([
        ['c0', crack],
        ['c1', crack],
        ['c2', other],
      ]);
      expect(found).toMatchObject({ state: 'differing', agreed: null });
      expect(groupSentence(found)).toContain('one by one');
    }
  });

  test('leaves out of the rest what was answered already', () => {
    const said: [string, Said][] = [
      ['c0', crack],
      ['c1', crack],
      ['c2', crack],
      ['c4', noEvent],
    ];
    expect(state(said).rest.map(({ rank }) => rank)).toEqual([13, 15]);
    const all: [string, Said][] = [...said, ['c3', crack], ['c5', crack]];
    expect(state(all).state).toBe('answered');
  });
});
