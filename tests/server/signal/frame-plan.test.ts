import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { FrameCursor } from '../../../server/signal/frame-cursor.ts';
import { bandBins, frameStart, planFrames } from '../../../server/signal/frame-plan.ts';

describe('the frame plan', () => {
  it.each([
    [8000, 256, 256],
    [48_000, 512, 256],
    [96_000, 1024, 256],
    [192_000, 2048, 256],
    [500_000, 4096, 512],
    [1_000_000, 8192, 512],
    [20_000_000, 16_384, 512],
  ])('at %d Hz has long frames of %d and short frames of %d samples', (rateHz, long, short) => {
    const plan = planFrames(rateHz, 1000);
    expect(plan.long.size).toBe(long);
    expect(plan.short.size).toBe(short);
    expect(plan.long.hop).toBe(long / 2);
  });

  it('has longer audible frames only where the clamp would leave too few lines', () => {
    expect(planFrames(192_000, 1).audible.size).toBe(2048);
    expect(planFrames(20_000_000, 1).audible.size).toBe(262_144);
  });

  it('centres a frame on its hop and keeps the frames at both ends inside', () => {
    const { long } = planFrames(48_000, 10_000);
    expect(frameStart(long, 0, 10_000)).toBe(0);
    expect(frameStart(long, 1, 10_000)).toBe(128);
    expect(frameStart(long, 2, 10_000)).toBe(384);
    expect(frameStart(long, long.count - 1, 10_000)).toBe(10_000 - 512);
  });

  it('covers every sample of any recording longer than a frame, with no frame outside', () => {
    fc.assert(
      fc.property(fc.integer({ min: 512, max: 20_000 }), (frames) => {
        const { long } = planFrames(48_000, frames);
        let covered = 0;
        for (let index = 0; index < long.count; index++) {
          const start = frameStart(long, index, frames);
          if (start > covered || start + long.size > frames) return false;
          covered = start + long.size;
        }
        return covered === frames;
      }),
    );
  });

  it('splits the bins at the hearing line', () => {
    expect(bandBins('audible', 256, 192_000)).toEqual({ first: 1, end: 27 });
    expect(bandBins('ultrasonic', 256, 192_000)).toEqual({ first: 27, end: 128 });
    expect(bandBins('ultrasonic', 256, 32_000)).toEqual({ first: 128, end: 128 });
  });

  it('refuses a rate of zero and a recording without frames', () => {
    expect(() => planFrames(0, 1)).toThrow(RangeError);
    expect(() => planFrames(48_000, 0)).toThrow(RangeError);
  });
});

describe('the frame cursor', () => {
  it('hands out every frame once, in fours, however the samples arrive', () => {
    const frames = 5000;
    const { long } = planFrames(48_000, frames);
    const takenWith = (blockFrames: number) => {
      const cursor = new FrameCursor(long, frames, { startSample: 0, endSample: frames }, 8, 4);
      const seen: number[] = [];
      for (let end = blockFrames; end < frames + blockFrames; end += blockFrames) {
        const window = { samples: new Float32Array(0), startSample: 0, endSample: Math.min(end, frames) };
        for (let run = cursor.take(window); run !== undefined; run = cursor.take(window)) {
          expect(run.end === long.count || (run.end - run.first) % 4 === 0).toBe(true);
          expect(run.end - run.first).toBeLessThanOrEqual(8);
          for (let index = run.first; index < run.end; index++) seen.push(index);
        }
      }
      return seen;
    };
    expect(takenWith(frames)).toEqual(Array.from({ length: long.count }, (_, index) => index));
    expect(takenWith(1)).toEqual(takenWith(frames));
    expect(takenWith(777)).toEqual(takenWith(frames));
  });

  it('has one short frame when the recording is shorter than a frame', () => {
    const { long } = planFrames(48_000, 3);
    const cursor = new FrameCursor(long, 3, { startSample: 0, endSample: 3 }, 8, 4);
    const window = { samples: new Float32Array(3), startSample: 0, endSample: 3 };
    expect(cursor.take(window)).toEqual({ first: 0, end: 1 });
    expect(cursor.samplesOf(0)).toBe(3);
    expect(cursor.take(window)).toBeUndefined();
  });
});
