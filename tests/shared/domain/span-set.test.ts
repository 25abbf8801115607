import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import type { SampleSpan } from '../../../shared/domain/event-span.ts';
import {
  holdsSample,
  intersectSpans,
  samplesIn,
  subtractSpans,
  toSpanSet,
  uniteSpans,
} from '../../../shared/domain/span-set.ts';

const most = 60;
const anySpans = fc.array(fc.record({ startSample: fc.nat(most), endSample: fc.nat(most) }), {
  maxLength: 12,
});
const anySet = anySpans.map(toSpanSet);

/** The plain way: which samples are in. */
function samplesOf(spans: readonly SampleSpan[]): Set<number> {
  const inside = new Set<number>();
  for (const { startSample, endSample } of spans)
    for (let sample = startSample; sample < endSample; sample += 1) inside.add(sample);
  return inside;
}

function isCanonical(spans: readonly SampleSpan[]): boolean {
  return spans.every(
    (span, index) =>
      span.endSample > span.startSample && (index === 0 || span.startSample > spans[index - 1]!.endSample),
  );
}

describe('a set of spans', () => {
  test('holds the samples of the spans it was made of, in one list for each set', () => {
    fc.assert(
      fc.property(anySpans, fc.nat(most), (spans, sample) => {
        const set = toSpanSet(spans);
        expect(isCanonical(set)).toBe(true);
        expect(samplesOf(set)).toEqual(samplesOf(spans));
        expect(samplesIn(set)).toBe(samplesOf(spans).size);
        expect(holdsSample(set, sample)).toBe(samplesOf(spans).has(sample));
      }),
    );
  });

  test('does not hang on the order in which spans come, and coming twice changes nothing', () => {
    fc.assert(
      fc.property(anySpans, (spans) => {
        const set = toSpanSet(spans);
        expect(toSpanSet(spans.toReversed())).toEqual(set);
        expect(uniteSpans(set, set, toSpanSet(spans))).toEqual(set);
      }),
    );
  });

  test('is cut and diminished sample by sample', () => {
    fc.assert(
      fc.property(anySet, anySet, (a, b) => {
        const [inA, inB] = [samplesOf(a), samplesOf(b)];
        const common = intersectSpans(a, b);
        const rest = subtractSpans(a, b);
        expect(samplesOf(common)).toEqual(new Set([...inA].filter((sample) => inB.has(sample))));
        expect(samplesOf(rest)).toEqual(new Set([...inA].filter((sample) => !inB.has(sample))));
        expect(isCanonical(common) && isCanonical(rest)).toBe(true);
        expect(uniteSpans(common, rest)).toEqual(a);
      }),
    );
  });
});
