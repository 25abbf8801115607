import fc from 'fast-check';
import { describe, expect, test } from 'vitest';
import { findQuietSpan } from '../../../server/signal/quiet-span.ts';

/** Steps of 10 samples that swing by these levels, around an offset. */
function course(levels: readonly number[], offset = 0) {
  return {
    startSample: 0,
    samplesPerPoint: 10,
    minimum: levels.map((level) => offset - level),
    maximum: levels.map((level) => offset + level),
  };
}

const steps = (count: number, level: number) => new Array<number>(count).fill(level);

describe('the quiet span', () => {
  test('is the quietest run of the wanted length, and grows over what is as quiet', () => {
    const levels = [...steps(50, 0.3), ...steps(35, 0.02), ...steps(50, 0.2)];
    expect(findQuietSpan(course(levels), 200)).toEqual({ startSample: 500, endSample: 850 });
  });

  test('avoids clicks, short as they are', () => {
    const quiet = [...steps(30, 0.01), 0.04, ...steps(30, 0.01), ...steps(40, 0.012), ...steps(40, 0.3)];
    const span = findQuietSpan(course(quiet), 400);
    expect(span?.startSample).toBeGreaterThanOrEqual(310);
    expect(span?.endSample).toBeLessThanOrEqual(1010);
  });

  test('takes a run with a click where there is no other', () => {
    const levels = Array.from({ length: 100 }, (_, n) => (n % 5 === 0 ? 0.5 : 0.01));
    expect(findQuietSpan(course(levels), 200)).not.toBeNull();
  });

  test('is no digital silence, which shows no noise', () => {
    const levels = [...steps(50, 0), ...steps(30, 0.1), ...steps(50, 0.3)];
    expect(findQuietSpan(course(levels), 200)).toEqual({ startSample: 500, endSample: 800 });
    expect(findQuietSpan(course(steps(50, 0)), 200)).toBeNull();
    expect(findQuietSpan(course([]), 200)).toBeNull();
  });

  test('is not moved by an offset', () => {
    const levels = [...steps(50, 0.3), ...steps(35, 0.02), ...steps(50, 0.2)];
    expect(findQuietSpan(course(levels, 0.4), 200)).toEqual(findQuietSpan(course(levels), 200));
  });

  test('of a short recording it is the whole, and between drop-outs what there is', () => {
    expect(findQuietSpan(course(steps(5, 0.1)), 1000)).toEqual({ startSample: 0, endSample: 50 });
    const levels = [0.1, 0, 0.1, 0.1, 0.1, 0, 0.1];
    expect(findQuietSpan(course(levels), 1000)).toEqual({ startSample: 20, endSample: 50 });
  });

  test('always lies inside the course and holds no silence', () => {
    fc.assert(
      fc.property(
        fc.array(fc.oneof(fc.constant(0), fc.double({ min: 1e-6, max: 1, noNaN: true })), { maxLength: 300 }),
        fc.integer({ min: 1, max: 2000 }),
        (levels, wanted) => {
          const span = findQuietSpan(course(levels), wanted);
          expect(span === null).toBe(levels.every((level) => level === 0));
          if (!span) return;
          expect(span.startSample).toBeGreaterThanOrEqual(0);
          expect(span.endSample).toBeLessThanOrEqual(levels.length * 10);
          expect(levels.slice(span.startSample / 10, span.endSample / 10).includes(0)).toBe(false);
        },
      ),
    );
  });
});
