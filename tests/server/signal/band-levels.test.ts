import { describe, expect, it } from 'vitest';
import { BandLevels } from '../../../server/signal/band-levels.ts';
import { FrameSpectrum } from '../../../server/signal/frame-spectrum.ts';
import { BandSummer, resolvedBands, thirdOctavesWithin } from '../../../server/signal/third-octaves.ts';
import { mix, sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

const rateHz = 48_000;
const size = 512;
const bands = resolvedBands(rateHz / size, rateHz / 2);

function levelsOf(samples: Float32Array, from = 0, to = samples.length): BandLevels {
  const levels = new BandLevels(bands);
  const frame = new FrameSpectrum(size);
  const summer = new BandSummer(bands, rateHz / size);
  const sums = new Float32Array(bands.length);
  for (let at = from; at + size <= to; at += size / 2) {
    frame.analyse(samples, at, at + size);
    summer.sum(frame.power, sums);
    levels.push(sums);
  }
  return levels;
}

describe('levels of bands', () => {
  it('have the mean of white noise in proportion to their width', () => {
    for (const { lowHz, highHz, meanDb } of levelsOf(whiteNoiseSignal(400_000, 0.01, 1)).finish()) {
      const expectedDb = 10 * Math.log10((2 * 0.0001 * (highHz - lowHz)) / (rateHz / 2));
      expect(Math.abs(meanDb! - expectedDb)).toBeLessThan(0.3);
    }
  });

  it('have a floor that a tone of short duty does not move, and a maximum that it does', () => {
    const noise = whiteNoiseSignal(480_000, 0.001, 2);
    const beeps = sine(480_000, 10_000, rateHz, 0.5).map((x, n) => (n % 48_000 < 4800 ? x : 0));
    const quiet = levelsOf(noise).finish();
    const loud = levelsOf(mix(noise, beeps)).finish();
    const at = bands.findIndex(({ lowHz, highHz }) => lowHz < 10_000 && highHz > 10_000);
    expect(Math.abs(loud[at]!.floorDb! - quiet[at]!.floorDb!)).toBeLessThan(0.6);
    expect(Math.abs(loud[at]!.medianDb! - quiet[at]!.medianDb!)).toBeLessThan(0.6);
    expect(loud[at]!.maximumDb!).toBeCloseTo(20 * Math.log10(0.5), 0);
    expect(loud[at]!.meanDb!).toBeCloseTo(20 * Math.log10(0.5) - 10, 0);
  });

  it('keep floor, median, mean and maximum in order but for half a histogram cell', () => {
    const levels = levelsOf(whiteNoiseSignal(200_000, 0.1, 3)).finish();
    for (const level of levels) {
      expect(level.floorDb!).toBeLessThan(level.medianDb!);
      expect(level.medianDb!).toBeLessThan(level.meanDb! + 0.5);
      expect(level.meanDb!).toBeLessThan(level.maximumDb!);
    }
    expect(levels[0]!.meanDb! - levels[0]!.floorDb!).toBeLessThan(7);
    expect(levels.at(-1)!.meanDb! - levels.at(-1)!.floorDb!).toBeLessThan(1.5);
  });

  it('of segments join to those of the whole', () => {
    const noise = whiteNoiseSignal(size * 400, 0.1, 4);
    const joined = levelsOf(noise, 0, size * 150);
    joined.absorb(structuredClone(levelsOf(noise, size * 149.5).part));
    expect(joined.finish()).toEqual(levelsOf(noise).finish());
  });

  it('are none without frames, null for nothing, and corrected by a gain', () => {
    const empty = new BandLevels(thirdOctavesWithin(110, 150));
    expect(empty.finish()).toEqual([]);
    empty.push(Float32Array.of(0));
    expect(empty.finish()[0]).toMatchObject({ floorDb: null, meanDb: null, maximumDb: null });
    const one = new BandLevels(thirdOctavesWithin(110, 150));
    one.push(Float32Array.of(0.5));
    expect(one.finish(() => 4)[0]!.meanDb).toBeCloseTo(10 * Math.log10(4), 6);
  });
});
