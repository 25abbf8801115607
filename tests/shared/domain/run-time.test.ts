import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  isRecordedAt,
  runPieces,
  runTimeNsAt,
  sampleAtRunTime,
  spanOfAll,
} from '../../../shared/domain/run-time.ts';

const clock = { sampleRateHz: 192_000, runOffsetNs: 2_500_000_000, clockPpm: 0 };

describe('the place of a recording in its run', () => {
  it('is its offset and its rate', () => {
    const pieces = runPieces(clock, 192_000);
    expect(runTimeNsAt(pieces, 0)).toBe(2_500_000_000);
    expect(runTimeNsAt(pieces, 96_000)).toBe(3_000_000_000);
    expect(sampleAtRunTime(pieces, 3_250_000_000)).toBe(144_000);
  });

  it('follows a recorder whose clock is fast: 20 ppm are 72 ms in an hour', () => {
    // An hour of the run at 48,000 samples a second that are 48,000.96.
    const fast = { sampleRateHz: 48_000, runOffsetNs: 0, clockPpm: 20 };
    const pieces = runPieces(fast, 48_000 * 3700);
    expect(runTimeNsAt(pieces, 48_000 * 3600)).toBeCloseTo(3600e9 - 72e6, -5);
  });

  it('is its own zero where nobody has told it', () => {
    const [piece] = runPieces({ ...clock, runOffsetNs: null }, 1920);
    expect(piece).toEqual({ startSample: 0, endSample: 1920, startNs: 0, endNs: 10_000_000 });
  });

  it('has gaps between the segments of a capture set, in which nothing was recorded', () => {
    const segments = [
      { startSample: 0, frames: 192, runTimeNs: 1_000_000 },
      { startSample: 192, frames: 192, runTimeNs: 9_000_000 },
    ];
    const pieces = runPieces(clock, 384, segments);
    expect(runTimeNsAt(pieces, 191)).toBeLessThan(2_000_000);
    expect(runTimeNsAt(pieces, 192)).toBe(9_000_000);
    expect([1_500_000, 5_000_000, 9_500_000].map((ns) => isRecordedAt(pieces, ns))).toEqual([
      true,
      false,
      true,
    ]);
    expect(sampleAtRunTime(pieces, 8_000_000)).toBe(192);
    expect(sampleAtRunTime(pieces, 2_500_000)).toBe(192);
    expect(sampleAtRunTime(pieces, 99_000_000)).toBe(384);
    expect(sampleAtRunTime(pieces, -5)).toBe(0);
  });

  it('leads back to the sample it came from, whatever the clock and the gaps', () => {
    const gapsNs = fc.array(fc.integer({ min: 0, max: 60_000_000_000 }), { minLength: 1, maxLength: 20 });
    const clocks = fc.record({
      sampleRateHz: fc.integer({ min: 8_000, max: 10_000_000 }),
      runOffsetNs: fc.integer({ min: -1e13, max: 1e13 }),
      clockPpm: fc.double({ min: -200, max: 200, noNaN: true }),
    });
    fc.assert(
      fc.property(clocks, gapsNs, fc.double({ min: 0, max: 0.999, noNaN: true }), (one, gaps, share) => {
        const frames = 4000;
        let atNs = one.runOffsetNs;
        const segments = gaps.map((gapNs, index) => {
          const segment = { startSample: index * frames, frames, runTimeNs: Math.ceil(atNs) };
          atNs = segment.runTimeNs + (frames * 1.001e9) / one.sampleRateHz + gapNs;
          return segment;
        });
        const pieces = runPieces(one, frames * gaps.length, segments);
        const sample = Math.floor(share * frames * gaps.length);
        // A nanosecond in ten thousand seconds is all that a double keeps apart.
        expect(sampleAtRunTime(pieces, runTimeNsAt(pieces, sample))).toBeCloseTo(sample, 1);
      }),
    );
  });

  it('rises with every sample', () => {
    fc.assert(
      fc.property(fc.integer({ min: 0, max: 9000 }), fc.integer({ min: 1, max: 900 }), (sample, further) => {
        const pieces = runPieces(clock, 10_000);
        expect(runTimeNsAt(pieces, sample + further)).toBeGreaterThan(runTimeNsAt(pieces, sample));
      }),
    );
  });
});

describe('the span of several', () => {
  it('holds the first start and the last end', () => {
    expect(
      spanOfAll([
        { startNs: 5, endNs: 9 },
        { startNs: -1, endNs: 3 },
      ]),
    ).toEqual({ startNs: -1, endNs: 9 });
    expect(spanOfAll([])).toBeNull();
  });
});
