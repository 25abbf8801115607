import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { clampSpan, spanFault } from '../../../shared/domain/event-span.ts';

const span = fc.record({
  startSample: fc.integer({ min: -50, max: 2000 }),
  endSample: fc.integer({ min: -50, max: 2000 }),
});

describe('a span of samples', () => {
  it('has an exclusive end', () => {
    expect(spanFault({ startSample: 10, endSample: 11 }, 11)).toBeNull();
    expect(spanFault({ startSample: 10, endSample: 10 }, 11)).toBe('must end after its start');
  });

  it.each([
    [{ startSample: -1, endSample: 5 }, 'starts before the recording'],
    [{ startSample: 5, endSample: 5 }, 'must end after its start'],
    [{ startSample: 5, endSample: 101 }, 'ends after the recording'],
    [{ startSample: 0.5, endSample: 5 }, 'must be whole samples'],
    [{ startSample: 99, endSample: 100 }, null],
  ])('says what is wrong with %j', (value, fault) => {
    expect(spanFault(value, 100)).toBe(fault);
  });

  it('clamps every span into the recording and leaves a good one alone', () => {
    fc.assert(
      fc.property(span, fc.integer({ min: 1, max: 1000 }), (value, frames) => {
        const clamped = clampSpan(value, frames);
        expect(spanFault(clamped, frames)).toBeNull();
        if (spanFault(value, frames) === null) expect(clamped).toEqual(value);
      }),
    );
  });
});
