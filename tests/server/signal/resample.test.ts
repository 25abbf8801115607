import { describe, expect, test } from 'vitest';
import { planResampling, resample } from '../../../server/signal/resample.ts';
import { fadeEnds, limitPeak } from '../../../server/signal/soft-ends.ts';
import { sine } from '../../support/wav/signals.ts';

function resampled(input: Float32Array, inputPerOutput: number, blockSize = 1_000_000): Float32Array {
  const plan = planResampling(inputPerOutput);
  const out = new Float32Array(Math.round(input.length / inputPerOutput));
  for (let outputStart = 0; outputStart < out.length; outputStart += blockSize) {
    const output = out.subarray(outputStart, outputStart + blockSize);
    resample(plan, { input, inputStart: 0, outputStart, output });
  }
  return out;
}

/** Away from the ends, where the silence around the signal is heard. */
function largestError(got: Float32Array, wanted: Float32Array, margin: number): number {
  let largest = 0;
  for (let n = margin; n < got.length - margin; n++)
    largest = Math.max(largest, Math.abs(got[n]! - wanted[n]!));
  return largest;
}

describe('resampling', () => {
  test.each([
    { fromHz: 192_000, toHz: 48_000 },
    { fromHz: 50_000, toHz: 48_000 },
    { fromHz: 19_200, toHz: 48_000 },
    { fromHz: 480, toHz: 48_000 },
  ])('a tone from $fromHz Hz keeps frequency, phase and amplitude at $toHz Hz', ({ fromHz, toHz }) => {
    const frequencyHz = Math.min(fromHz, toHz) * 0.3;
    const got = resampled(sine(8000, frequencyHz, fromHz, 0.5), fromHz / toHz);
    const margin = Math.ceil((toHz / fromHz) * planResampling(fromHz / toHz).reachSamples);
    expect(got.length - 2 * margin).toBeGreaterThan(100);
    expect(largestError(got, sine(got.length, frequencyHz, toHz, 0.5), margin)).toBeLessThan(1e-4);
  });

  test('what would alias is gone: 30 kHz at 192 kHz leaves less than -80 dB at 48 kHz', () => {
    const got = resampled(sine(40_000, 30_000, 192_000), 4);
    expect(largestError(got, new Float32Array(got.length), 200)).toBeLessThan(1e-4);
  });

  test('a click stays where it is and stays symmetric about its place', () => {
    const input = new Float32Array(4001);
    input[2000] = 1;
    const got = resampled(input, 4);
    expect(got.indexOf(Math.max(...got))).toBe(500);
    for (let n = 1; n < 20; n++) expect(got[500 - n]).toBeCloseTo(got[500 + n]!, 6);
  });

  test('blocks join without a seam', () => {
    const input = sine(10_000, 1234, 96_000);
    expect(resampled(input, 2.0833, 77)).toEqual(resampled(input, 2.0833));
  });

  test.each([0, -1, Number.NaN, Number.POSITIVE_INFINITY])('%d is no ratio', (ratio) => {
    expect(() => planResampling(ratio)).toThrow('inputPerOutput');
  });
});

describe('what protects ears', () => {
  test('a peak above the limit lowers the whole, one below leaves it alone', () => {
    const loud = Float32Array.of(0.25, -1, 0.5);
    limitPeak(loud, 0.5);
    expect([...loud]).toEqual([0.125, -0.5, 0.25]);
    const soft = Float32Array.of(0.1, -0.2);
    limitPeak(soft, 0.5);
    expect(soft).toEqual(Float32Array.of(0.1, -0.2));
  });

  test('both ends begin at nothing and the middle is untouched', () => {
    const samples = new Float32Array(100).fill(1);
    fadeEnds(samples, 10);
    expect([samples[0], samples[99], samples[50], samples[10], samples[89]]).toEqual([0, 0, 1, 1, 1]);
    expect(samples[5]).toBeCloseTo(0.5, 6);
  });

  test('a signal shorter than two fades is faded over its halves', () => {
    const samples = new Float32Array(4).fill(1);
    fadeEnds(samples, 10);
    expect([...samples]).toEqual([0, 0.5, 0.5, 0]);
  });
});
