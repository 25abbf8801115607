import { describe, expect, it } from 'vitest';
import { LowFrames } from '../../../server/signal/low-frames.ts';
import { LowRateSignal, lowRateFactor, lowRateResponse } from '../../../server/signal/low-rate.ts';
import { lowMeanSums } from './content-of.ts';
import { sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function reduced(samples: Float32Array, sampleRateHz: number, block: number): number[] {
  const signal = new LowRateSignal(sampleRateHz, lowMeanSums(sampleRateHz));
  const out: number[] = [];
  for (let from = 0; from < samples.length; from += block) {
    out.push(...signal.push(samples, from, Math.min(samples.length, from + block)));
  }
  return out;
}

describe('a signal reduced to about 8 kHz', () => {
  it('is the mean over triangles two blocks wide', () => {
    const samples = whiteNoiseSignal(10_000, 0.1, 1);
    const factor = 6;
    const found = reduced(samples, 48_000, 10_000);
    expect(found).toHaveLength(Math.floor(10_000 / factor) - 1);
    for (const [j, value] of found.entries()) {
      let sum = 0;
      for (let n = 0; n < 2 * factor - 1; n++) {
        sum += (n < factor ? n + 1 : 2 * factor - 1 - n) * samples[j * factor + n]!;
      }
      expect(value).toBeCloseTo(sum / factor ** 2, 7);
    }
  });

  it('is at high rates that of the means of equal blocks', () => {
    const samples = whiteNoiseSignal(12_000, 0.1, 4);
    const means = Float32Array.from(
      { length: 2000 },
      (_, k) => samples.subarray(6 * k, 6 * k + 6).reduce((sum, x) => sum + x, 0) / 6,
    );
    const found = reduced(samples, 192_000, 12_000);
    const expected = reduced(means, 32_000, 2000);
    expect(found).toHaveLength(expected.length);
    for (const [j, value] of found.entries()) expect(value).toBeCloseTo(expected[j]!, 7);
  });

  it.each([1, 7, 24, 100, 9999])('does not depend on blocks, here of %d', (block) => {
    const samples = whiteNoiseSignal(10_000, 0.1, 2);
    const whole = reduced(samples, 192_000, 10_000);
    const found = reduced(samples, 192_000, block);
    expect(found).toHaveLength(whole.length);
    for (const [j, value] of found.entries()) expect(value).toBeCloseTo(whole[j]!, 7);
  });

  it.each([
    [48_000, 700],
    [192_000, 1000],
    [1_000_000, 2000],
  ])(
    'at %d Hz keeps a tone of %d Hz as its response says, and weighs down what folds onto it',
    (rateHz, hz) => {
      const rms = (signal: number[]) => Math.sqrt(signal.reduce((sum, x) => sum + x * x, 0) / signal.length);
      const frames = Math.round(rateHz / 2);
      const level = rms(reduced(sine(frames, hz, rateHz), rateHz, frames));
      expect(level ** 2 / 0.5).toBeCloseTo(lowRateResponse(hz, rateHz), 2);
      const foldedHz = rateHz / lowRateFactor(rateHz) - hz;
      const folded = rms(reduced(sine(frames, foldedHz, rateHz), rateHz, frames));
      expect((folded / level) ** 2).toBeLessThan(1.2 * (hz / foldedHz) ** 4);
    },
  );

  it('is the signal itself where its rate is not twice 8 kHz', () => {
    const samples = whiteNoiseSignal(1000, 0.1, 3);
    expect(reduced(samples, 12_000, 300)).toEqual([...samples]);
    expect(lowRateResponse(3000, 12_000)).toBe(1);
  });
});

describe('frames of a reduced signal', () => {
  it('have about 64 ms at any rate, overlap by half and say where they begin', () => {
    for (const rateHz of [8000, 44_100, 192_000, 1_000_000]) {
      const starts: number[] = [];
      const settings = { sampleRateHz: rateHz, firstSample: 1_048_576, sumBlocks: lowMeanSums(rateHz) };
      const frames = new LowFrames(settings, ({ startSample }) => starts.push(startSample));
      frames.push(new Float32Array(rateHz), 0, rateHz);
      const hopS = frames.hopSamples / rateHz;
      expect(hopS).toBeGreaterThan(0.02);
      expect(hopS).toBeLessThan(0.046);
      expect(starts.length).toBeGreaterThan(1 / hopS - 3);
      expect(starts[0]).toBe(1_048_576);
      expect(starts[1]! - starts[0]!).toBe(frames.hopSamples);
    }
  });

  it('hold a tone at its level', () => {
    let highest = 0;
    const settings = { sampleRateHz: 192_000, firstSample: 0, sumBlocks: lowMeanSums(192_000) };
    const frames = new LowFrames(settings, ({ power }) => (highest = Math.max(...power)));
    frames.push(sine(192_000, 1000, 192_000, 0.5), 0, 192_000);
    expect(highest / lowRateResponse(1000, 192_000)).toBeCloseTo(0.25, 2);
  });
});
