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
  it('visits the same frames however the samples arrive', () => {
    const frames = 5000;
    const { long } = planFrames(48_000, frames);
    const samples = Float32Array.from({ length: frames }, (_, n) => n);
    const visitedWith = (blockFrames: number) => {
      const cursor = new FrameCursor(long, frames, { startSample: 0, endSample: frames });
      const seen: number[][] = [];
      for (let end = blockFrames; end < frames + blockFrames; end += blockFrames) {
        const window = { samples, startSample: 0, endSample: Math.min(end, frames) };
        cursor.advance(window, (index, values, from, to) => seen.push([index, values[from]!, to - from]));
      }
      return seen;
    };
    expect(visitedWith(1)).toEqual(visitedWith(frames));
    expect(visitedWith(777)).toHaveLength(long.count);
  });

  it('has one short frame when the recording is shorter than a frame', () => {
    const { long } = planFrames(48_000, 3);
    const cursor = new FrameCursor(long, 3, { startSample: 0, endSample: 3 });
    const seen: number[] = [];
    const window = { samples: new Float32Array(3), startSample: 0, endSample: 3 };
    cursor.advance(window, (_index, _samples, from, to) => seen.push(from, to));
    expect(seen).toEqual([0, 3]);
  });
});
