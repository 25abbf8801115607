import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { spanFault } from '@shared/domain/event-span.ts';
import {
  fittedShift,
  mergeFault,
  mergeMarks,
  movedSpan,
  splitMark,
} from '@/composables/bench/marking/mark-edits.ts';
import { placeOf, withChanges } from '@/composables/bench/marking/sorted-marks.ts';
import { byTime } from '@/composables/bench/mark.ts';
import { benchMark } from './mark-fixture.ts';

const frames = 10_000;
const span = fc
  .tuple(fc.integer({ min: 0, max: frames - 1 }), fc.integer({ min: 1, max: frames }))
  .map(([a, b]) => ({ startSample: Math.min(a, b - 1), endSample: Math.max(a + 1, b) }));
const part = fc.constantFrom('start' as const, 'end' as const, 'whole' as const);
const shift = fc.integer({ min: -2 * frames, max: 2 * frames });

describe('moving a part of a mark', () => {
  it('never leaves the recording and never empties the span', () => {
    fc.assert(
      fc.property(span, part, shift, (given, what, samples) => {
        expect(spanFault(movedSpan(given, what, samples, frames), frames)).toBeNull();
      }),
    );
  });

  it('leaves the other edge, or the length, as it was', () => {
    fc.assert(
      fc.property(span, shift, (given, samples) => {
        expect(movedSpan(given, 'start', samples, frames).endSample).toBe(given.endSample);
        expect(movedSpan(given, 'end', samples, frames).startSample).toBe(given.startSample);
        const whole = movedSpan(given, 'whole', samples, frames);
        expect(whole.endSample - whole.startSample).toBe(given.endSample - given.startSample);
      }),
    );
  });

  it('moves several by the same, as far as the first of them can go', () => {
    fc.assert(
      fc.property(fc.array(span, { minLength: 1, maxLength: 6 }), shift, (spans, samples) => {
        const moved = fittedShift(spans, samples, frames);
        expect(Math.abs(moved)).toBeLessThanOrEqual(Math.abs(samples));
        for (const { startSample, endSample } of spans) {
          expect(startSample + moved).toBeGreaterThanOrEqual(0);
          expect(endSample + moved).toBeLessThanOrEqual(frames);
        }
      }),
    );
  });
});

describe('splitting and merging', () => {
  it('parts a mark without losing or doubling a sample, and merging gives its span and band again', () => {
    fc.assert(
      fc.property(span, fc.double({ min: 0, max: 1, noNaN: true }), (given, share) => {
        const mark = benchMark({ ...given, lowHz: 2000, highHz: 90_000, note: 'seen' });
        const at = given.startSample + share * (given.endSample - given.startSample);
        const halves = splitMark(mark, at);
        if (!halves) {
          const rounded = Math.round(at);
          expect(rounded <= given.startSample || rounded >= given.endSample).toBe(true);
          return;
        }
        const [first, second] = halves;
        expect(first.startSample).toBe(given.startSample);
        expect(first.endSample).toBe(second.startSample);
        expect(second.endSample).toBe(given.endSample);
        expect(mergeMarks([second, first])).toEqual(mark);
      }),
    );
  });

  it('gives the later part no candidate and no place of its own that somebody put', () => {
    const mark = benchMark({ origin: 'candidate', candidateId: 'c', rawStartSample: 990 });
    const [first, second] = splitMark(mark, 1100) ?? [];
    expect(first).toMatchObject({ origin: 'candidate', candidateId: 'c', rawStartSample: 990 });
    expect(second).toMatchObject({ origin: 'hand', candidateId: null, rawStartSample: null });
  });

  it('keeps the doubt of the least sure, all notes once, and a band only where all have one', () => {
    const merged = mergeMarks([
      benchMark({
        startSample: 500,
        endSample: 2000,
        note: 'faint',
        lowHz: 10,
        highHz: 50,
        classKey: 'twin',
      }),
      benchMark({ confidence: 'unsure', note: 'loud', lowHz: 5 }),
      benchMark({ startSample: 1500, endSample: 1600, note: 'faint', lowHz: 8, confidence: 'probable' }),
    ]);
    expect(merged).toMatchObject({
      startSample: 500,
      endSample: 2000,
      classKey: 'twin',
      confidence: 'unsure',
      note: 'faint; loud',
      lowHz: 5,
      highHz: null,
    });
  });

  it('is refused in words for one mark and across channels', () => {
    expect(mergeFault([benchMark()])).toMatch(/at least two/);
    expect(mergeFault([benchMark(), benchMark({ key: 'b', channel: 1 })])).toMatch(/different channels/);
    expect(mergeFault([benchMark(), benchMark({ key: 'b' })])).toBeNull();
  });
});

describe('the list in order of time', () => {
  const mark = fc.record({ key: fc.constantFrom('a', 'b', 'c', 'd', 'e'), startSample: fc.nat(50) });

  it('is the same as a list that is sorted anew, after any changes', () => {
    fc.assert(
      fc.property(fc.array(mark, { maxLength: 20 }), (changes) => {
        const byKey = new Map<string, ReturnType<typeof benchMark>>();
        let list: ReturnType<typeof benchMark>[] = [];
        for (const [index, values] of changes.entries()) {
          const after = index % 4 === 3 ? null : benchMark({ ...values, endSample: 100 });
          list = withChanges(list, [{ before: byKey.get(values.key), after }]);
          if (after) byKey.set(values.key, after);
          else byKey.delete(values.key);
          expect(list).toEqual([...byKey.values()].sort(byTime));
        }
        for (const [place, one] of list.entries()) expect(placeOf(list, one)).toBe(place);
      }),
    );
  });
});
