import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  aliasFrequencyHz,
  amplitudeToDb,
  amplitudeToVolts,
  dbAe,
  dbToAmplitude,
  powerToDb,
  quantisationSnrDb,
  rmsToDb,
  samplesToSeconds,
  secondsToSample,
  shiftedFrequencyHz,
  slowedFrequencyHz,
  voltsToAmplitude,
} from '../../../shared/audio/units.ts';

describe('samples and seconds', () => {
  it('a sample index survives the way through seconds at any rate', () => {
    fc.assert(
      fc.property(fc.nat(2 ** 40), fc.integer({ min: 1, max: 20_000_000 }), (sample, rate) => {
        expect(secondsToSample(samplesToSeconds(sample, rate), rate)).toBe(sample);
      }),
      { seed: 3 },
    );
  });

  it('a time between two samples goes to the nearer one', () => {
    expect(secondsToSample(0.1004, 1000)).toBe(100);
    expect(secondsToSample(0.1006, 1000)).toBe(101);
  });

  it('a rate that is not above 0 is an error with its name', () => {
    expect(() => samplesToSeconds(1, 0)).toThrow('sampleRateHz 0 must be above 0');
    expect(() => secondsToSample(1, Number.NaN)).toThrow(RangeError);
  });
});

describe('levels', () => {
  it.each([
    // AES17: the level of a full-scale sine is 0 dB, of a full-scale square wave +3.01 dB.
    ['full-scale sine', Math.SQRT1_2, 0],
    ['full-scale square', 1, 3.0103],
  ])('the rms of a %s is %d as amplitude and has its AES17 level', (_, rms, levelDb) => {
    expect(rmsToDb(rms)).toBeCloseTo(levelDb, 4);
  });

  it('half the amplitude is 6.02 dB less, half the power 3.01 dB less', () => {
    expect(amplitudeToDb(0.5)).toBeCloseTo(-6.0206, 4);
    expect(amplitudeToDb(-0.5)).toBeCloseTo(-6.0206, 4);
    expect(powerToDb(0.5)).toBeCloseTo(-3.0103, 4);
  });

  it('silence has no level', () => {
    expect([amplitudeToDb(0), powerToDb(0), rmsToDb(0), dbAe(0, 40)]).toEqual([null, null, null, null]);
  });

  it('a level survives the way through the amplitude', () => {
    fc.assert(
      fc.property(fc.double({ min: -200, max: 200, noNaN: true }), (levelDb) => {
        expect(amplitudeToDb(dbToAmplitude(levelDb))).toBeCloseTo(levelDb, 9);
      }),
      { seed: 4 },
    );
  });

  it.each([8, 16, 24])('the quantisation ratio of %d bits is 6.0206 N + 1.7609 dB', (bits) => {
    // Bennett 1948 (the form with these constants is common practice).
    expect(quantisationSnrDb(bits)).toBeCloseTo(6.0206 * bits + 1.7609, 2);
  });
});

describe('dB(AE), ASTM E1316: dB re 1 microvolt, less the preamplifier gain', () => {
  it.each([
    [1e-6, 0, 0],
    [10e-6, 0, 20],
    [1e-3, 0, 60],
    [0.1, 0, 100],
    [1, 0, 120],
    [1, 40, 80],
    [-1, 40, 80],
  ])('%d V after a preamplifier of %d dB is %d dB(AE)', (volts, gainDb, levelDb) => {
    expect(dbAe(volts, gainDb)).toBeCloseTo(levelDb, 9);
  });

  it('volts at full scale turn amplitudes into volts and back', () => {
    expect(amplitudeToVolts(0.25, 10)).toBe(2.5);
    expect(voltsToAmplitude(2.5, 10)).toBe(0.25);
    expect(() => amplitudeToVolts(0.25, 0)).toThrow('voltsAtFullScale 0');
  });
});

describe('where a frequency ends up', () => {
  it.each([
    // |f - round(f/fs) fs|, computed by hand.
    [60_000, 96_000, 36_000],
    [150_000, 192_000, 42_000],
    [108_000, 128_000, 20_000],
    [20_000, 48_000, 20_000],
  ])('%d Hz sampled at %d Hz appears at %d Hz', (frequencyHz, sampleRateHz, aliasHz) => {
    expect(aliasFrequencyHz(frequencyHz, sampleRateHz)).toBe(aliasHz);
  });

  it('150 kHz played ten times slower is heard at 15 kHz', () => {
    expect(slowedFrequencyHz(150_000, 10)).toBe(15_000);
  });

  it('42 kHz mixed with 40 kHz is heard at 2 kHz', () => {
    expect(shiftedFrequencyHz(42_000, 40_000)).toBe(2_000);
  });
});
