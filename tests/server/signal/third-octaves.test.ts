import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import {
  BandSummer,
  resolvedBands,
  thirdOctave,
  thirdOctavesWithin,
} from '../../../server/signal/third-octaves.ts';
import { sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

describe('third-octave bands', () => {
  // IEC 61260-1:2014, Annex E, table E.1 (from memory): exact base-10 mid-band frequencies to five figures.
  it.each([
    [-16, 25.119],
    [-10, 100],
    [-4, 398.11],
    [-1, 794.33],
    [0, 1000],
    [1, 1258.9],
    [2, 1584.9],
    [13, 19_953],
  ])('number %d has its middle at %d Hz', (index, middleHz) => {
    expect(thirdOctave(index).middleHz).toBeCloseTo(middleHz, middleHz < 100 ? 3 : middleHz < 1000 ? 2 : 0);
  });

  it('join without a gap, three to the octave ratio of 10^0.3', () => {
    const bands = thirdOctavesWithin(20, 100_000);
    for (const [k, band] of bands.entries()) {
      if (k > 0) expect(band.lowHz).toBeCloseTo(bands[k - 1]!.highHz, 6);
      if (k > 2) expect(band.middleHz / bands[k - 3]!.middleHz).toBeCloseTo(1.995262, 5);
    }
  });

  it('lie whole between the limits', () => {
    fc.assert(
      fc.property(fc.double({ min: 1, max: 1e5 }), fc.double({ min: 1, max: 1e6 }), (lowHz, highHz) => {
        for (const band of thirdOctavesWithin(lowHz, highHz)) {
          expect(band.lowHz).toBeGreaterThan(lowHz * 0.999999);
          expect(band.highHz).toBeLessThan(highHz * 1.000001);
        }
      }),
    );
  });

  it('begin where two lines fit into a band', () => {
    const [lowest] = resolvedBands(93.75, 24_000);
    expect(lowest!.middleHz).toBeCloseTo(1000, 6);
    expect(lowest!.highHz - lowest!.lowHz).toBeGreaterThan(2 * 93.75);
  });
});

describe('sums over bands', () => {
  it('share the mean square of white noise out by width', () => {
    const size = 4096;
    const frame = new FrameSpectrum(size);
    const summer = new BandSummer(resolvedBands(48_000 / size, 24_000), 48_000 / size);
    const noise = whiteNoiseSignal(size * 100, 0.1, 1);
    const mean = new Float64Array(summer.bands.length);
    const sums = new Float32Array(summer.bands.length);
    for (let k = 0; k < 100; k++) {
      frame.analyse(noise, k * size, (k + 1) * size);
      summer.sum(frame.power, sums);
      for (const [band, value] of sums.entries()) mean[band]! += value / 100;
    }
    for (const [band, { lowHz, highHz }] of summer.bands.entries()) {
      const expectedDb = 10 * Math.log10((0.01 * (highHz - lowHz)) / 24_000);
      const values = 2 * (highHz - lowHz) * ((100 * size) / 48_000);
      const tolerance = 4 * 10 * Math.log10(1 + Math.sqrt(2 / values)) + 0.05;
      expect(Math.abs(10 * Math.log10(mean[band]!) - expectedDb)).toBeLessThan(tolerance);
    }
  });

  it('hold all of a tone in its band', () => {
    const size = 4096;
    const frame = new FrameSpectrum(size);
    frame.analyse(sine(size, 3000, 48_000, 0.5), 0, size);
    const summer = new BandSummer(resolvedBands(48_000 / size, 24_000), 48_000 / size);
    const sums = new Float32Array(summer.bands.length);
    summer.sum(frame.power, sums);
    const at = summer.bands.findIndex(({ lowHz, highHz }) => lowHz <= 3000 && highHz > 3000);
    expect(sums[at]!).toBeCloseTo(0.125, 6);
  });

  it('lose nothing where bands join, however narrow', () => {
    const bands = thirdOctavesWithin(10, 5000);
    const summer = new BandSummer(bands, 100);
    const power = Float32Array.from({ length: 60 }, (_, k) => k + 1);
    const sums = new Float32Array(bands.length);
    summer.sum(power, sums);
    const total = sums.reduce((sum, value) => sum + value, 0);
    const whole = new BandSummer(
      [{ index: 0, middleHz: 1, lowHz: bands[0]!.lowHz, highHz: bands.at(-1)!.highHz }],
      100,
    );
    const one = new Float32Array(1);
    whole.sum(power, one);
    expect(total).toBeCloseTo(one[0]!, 3);
  });
});
