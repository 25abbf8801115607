import { describe, expect, it } from 'vitest';
import { aliasFrequencyHz } from '../../../shared/audio/units.ts';
import { realFft } from '../../../server/signal/fft.ts';
import { FrameSpectrum, meanSquareOfBins } from '../../../server/signal/frame-spectrum.ts';
import { hannWindow } from '../../../server/signal/hann.ts';
import { sine } from '../../support/wav/signals.ts';
import { makeReferenceSignal, REFERENCE_RATE_HZ, spectra } from '../../reference/spectra-reference.ts';

function powerOf(samples: Float32Array): Float32Array {
  const frame = new FrameSpectrum(samples.length);
  frame.analyse(samples, 0, samples.length);
  return frame.power;
}

function strongestBin(power: Float32Array): number {
  return power.reduce((best, value, bin) => (value > power[best]! ? bin : best), 0);
}

describe('the real transform', () => {
  it('obeys Parseval: [1, 2, 3, 4] has energy 30 on both sides', () => {
    const fft = realFft(32);
    fft.input.fill(0);
    fft.input.set([1, 2, 3, 4]);
    fft.transform();
    const [first, nyquist, ...rest] = fft.output;
    const twoSided = first! ** 2 + nyquist! ** 2 + 2 * rest.reduce((sum, value) => sum + value * value, 0);
    expect(twoSided / 32).toBeCloseTo(30, 4);
  });

  it('gives a constant to the first line alone', () => {
    const fft = realFft(64);
    fft.input.fill(1);
    fft.transform();
    expect(fft.output[0]).toBeCloseTo(64, 4);
    expect(Math.max(...fft.output.subarray(1).map(Math.abs))).toBeLessThan(1e-5);
  });

  it.each([0, 31, 48, 2 ** 21])('refuses the size %d', (size) => {
    expect(() => realFft(size)).toThrow(RangeError);
  });
});

/** Harris 1978, Proc. IEEE 66:51, Table I. */
describe('the periodic Hann window', () => {
  const { weights, sum, squareSum } = hannWindow(1024);

  it('has coherent gain 0.5, mean square 0.375 and noise bandwidth 1.5 bins', () => {
    const summed = weights.reduce((total, weight) => total + weight, 0);
    const squares = weights.reduce((total, weight) => total + weight * weight, 0);
    expect(summed / 1024).toBeCloseTo(0.5, 7);
    expect(squares / 1024).toBeCloseTo(0.375, 7);
    expect(sum).toBe(512);
    expect((1024 * squareSum) / (sum * sum)).toBe(1.5);
  });

  it('correlates with itself to 1/6 at half overlap', () => {
    let product = 0;
    for (let n = 0; n < 512; n++) product += weights[n]! * weights[n + 512]!;
    expect(product / squareSum).toBeCloseTo(1 / 6, 6);
  });
});

describe('a frame spectrum', () => {
  it('gives a sine of amplitude 1 at bin 100 power 1, and half the amplitude to its neighbours', () => {
    const power = powerOf(sine(1024, 100, 1024));
    expect(Math.sqrt(power[100]!)).toBeCloseTo(1, 5);
    expect(Math.sqrt(power[99]!)).toBeCloseTo(0.5, 5);
    expect(Math.sqrt(power[101]!)).toBeCloseTo(0.5, 5);
  });

  it('loses 1.423623 dB half a bin off (amplitude 0.848826)', () => {
    expect(Math.sqrt(powerOf(sine(1024, 100.5, 1024))[100]!)).toBeCloseTo(0.848826, 4);
  });

  it('carries the mean square of the signal in its lines', () => {
    const power = powerOf(sine(1024, 100, 1024));
    expect(meanSquareOfBins(power, 1, 512)).toBeCloseTo(0.5, 5);
  });

  it.each([
    [60_000, 96_000, 36_000],
    [150_000, 192_000, 42_000],
    [108_000, 128_000, 20_000],
  ])('shows %d Hz sampled at %d Hz at %d Hz', (frequencyHz, rateHz, seenHz) => {
    const power = powerOf(sine(1024, frequencyHz, rateHz));
    expect(aliasFrequencyHz(frequencyHz, rateHz)).toBe(seenHz);
    expect(strongestBin(power)).toBe(Math.round((seenHz * 1024) / rateHz));
  });

  it('removes the mean and calls a constant silent', () => {
    const frame = new FrameSpectrum(256);
    frame.analyse(new Float32Array(256).fill(0.2), 0, 256);
    expect(frame.mean).toBeCloseTo(0.2, 6);
    expect(frame.isSilent).toBe(true);
  });

  it('agrees with numpy in float64 within the rounding of float32', () => {
    const { firstFrame } = spectra;
    const frame = new FrameSpectrum(2048);
    frame.analyse(makeReferenceSignal(2048), 0, 2048);
    expect(frame.meanSquare / firstFrame.meanSquare).toBeCloseTo(1, 7);
    expect((frame.crossings * REFERENCE_RATE_HZ) / 2048).toBeCloseTo(firstFrame.zeroCrossingRateHz, 6);
    for (const [bin, expected] of Object.entries(firstFrame.powerAtBins)) {
      // Relative to the frame's whole power: its weakest lines are rounding noise of the strongest.
      const error = Math.abs(frame.power[Number(bin)]! - expected);
      expect(error).toBeLessThan(1e-9 * firstFrame.totalPower + 1e-5 * expected);
    }
  });

  it('counts the crossings of a sine on an offset, twice its frequency', () => {
    const samples = sine(4096, 100, 4096, 0.1, 0.5).map((x) => x + 0.4);
    const frame = new FrameSpectrum(4096);
    frame.analyse(samples, 0, 4096);
    expect(Math.abs(frame.crossings - 200)).toBeLessThanOrEqual(1);
    expect(frame.peak).toBeCloseTo(0.5, 4);
  });

  it('gives the same lines when only some are asked for', () => {
    const samples = makeReferenceSignal(256);
    const whole = new FrameSpectrum(256);
    const part = new FrameSpectrum(256);
    whole.analyse(samples, 0, 256);
    part.analyseBins(samples, 0, 256, { first: 27, end: 128 });
    // Apart by the rounding of float32, relative to the strongest line of the frame.
    const strongest = Math.max(...whole.power);
    for (let k = 27; k < 128; k++) {
      const error = Math.abs(part.power[k]! - whole.power[k]!);
      expect(error).toBeLessThan(1e-9 * strongest + 1e-5 * whole.power[k]!);
    }
    expect(part.power[26]).toBe(0);
  });
});
