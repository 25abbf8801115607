import { describe, expect, it } from 'vitest';
import { type SubBandNoise, watchableSubBands } from '../../../server/signal/floor-edges.ts';
import { bandLimitedScene, type BandLimitedOptions } from './band-limited-noise.ts';
import { compareWithTruth } from './click-truth.ts';
import { detectAll } from './detect.ts';
import { addClick, seededNormal, seededUniform } from './synthetic-clicks.ts';

/** Eight sub-bands in each octave from 1.5 to 96 kHz. */
function subBands(densityAt: (hz: number) => number, isSettled = true): SubBandNoise[] {
  return Array.from({ length: 6 }, (_, octave) => 1500 * 2 ** octave).flatMap((octaveHz) =>
    Array.from({ length: 8 }, (__, k) => {
      const lowHz = octaveHz * (1 + k / 8);
      const highHz = octaveHz * (1 + (k + 1) / 8);
      return { lowHz, highHz, density: densityAt((lowHz + highHz) / 2), isSettled };
    }),
  );
}

function unwatchedHz(bands: SubBandNoise[]): number[] {
  const isWatchable = watchableSubBands(bands);
  return bands.flatMap(({ lowHz }, band) => (isWatchable[band] ? [] : [lowHz]));
}

const inDb = (db: number) => 10 ** (db / 10);

/** Power response of a mass on a spring, a sensor's simplest. */
const resonance = (hz: number, resonantHz: number, quality: number) => {
  const x = (hz / resonantHz) ** 2;
  return 1 / ((1 - x) ** 2 + x / quality ** 2);
};

describe('sub-bands beside the edge of a noise floor', () => {
  it.each([
    ['white', () => 1],
    ['pink', (hz: number) => 1 / hz],
    ['brown', (hz: number) => 1 / hz ** 2],
    ['a hum up to 2 kHz', (hz: number) => (hz < 2000 ? 1e6 : 1)],
    ['a tone of a machine', (hz: number) => (hz > 36_000 && hz < 39_000 ? 1e4 : 1)],
    ['a sensor resonant at 30 kHz by 20 dB', (hz: number) => 1e-3 + resonance(hz, 30_000, 10)],
    ['a sensor resonant at 11 kHz by 30 dB', (hz: number) => 1e-3 + resonance(hz, 11_000, 32)],
    ['silence', () => 0],
  ] as const)('are all watched in noise that ends nowhere: %s', (_, densityAt) => {
    expect(unwatchedHz(subBands(densityAt))).toEqual([]);
  });

  it('are watched below the edge alone where next to nothing lies above', () => {
    const unwatched = unwatchedHz(subBands((hz) => (hz < 21_000 ? 1 / hz : 1e-11)));
    expect(unwatched[0]).toBe(19_500);
    expect(unwatched).toHaveLength(3 + 16);
  });

  it('are watched from half an octave over the edge where quiet noise is there', () => {
    const quiet = subBands((hz) => (hz < 21_000 ? 1 : inDb(-30)));
    expect(Math.max(...unwatchedHz(quiet))).toBe(30_000);
    const quieter = subBands((hz) => (hz < 21_000 ? 1 : inDb(-41)));
    expect(Math.max(...unwatchedHz(quieter))).toBe(90_000);
  });

  it('are not watched above an edge before filters have forgotten the beginning', () => {
    const beginning = subBands((hz) => (hz < 21_000 ? 1 : inDb(-15)), false);
    expect(Math.max(...unwatchedHz(beginning))).toBe(90_000);
    expect(unwatchedHz(subBands(() => 1, false))).toEqual([]);
  });

  it('are left out beside a tone above the edge all the same', () => {
    const withTone = subBands((hz) => (hz < 21_000 || (hz > 27_000 && hz < 30_000) ? 1 : 1e-6));
    expect(unwatchedHz(withTone)).toContain(24_000);
  });
});

const CONVERSIONS = [
  { recordedHz: 44_100, sampleRateHz: 96_000 },
  { recordedHz: 44_100, sampleRateHz: 192_000 },
  { recordedHz: 32_000, sampleRateHz: 48_000 },
  { recordedHz: 38_000, sampleRateHz: 48_000 },
] as const;
const NOISES = [
  { colour: 'white', rounds: true },
  { colour: 'white', rounds: false },
  { colour: 'pink and hum', rounds: true },
  { colour: 'pink and hum', rounds: false },
] as const;
const CASES = CONVERSIONS.flatMap((rates) => NOISES.map((noise) => ({ ...rates, ...noise })));

function found({ sampleRateHz }: Pick<BandLimitedOptions, 'sampleRateHz'>, samples: Float32Array) {
  return detectAll(samples, { sampleRateHz }).found;
}

describe('detector in noise that ends below half the rate', () => {
  it.each(CASES)(
    'finds nothing in $colour noise of $recordedHz samples a second converted to $sampleRateHz, rounded $rounds',
    (noise) => {
      const { samples } = bandLimitedScene({ ...noise, seconds: 3, seed: 21, clicksPerSecond: 0 });
      expect(found(noise, samples)).toEqual([]);
    },
    60_000,
  );

  it.each(CASES.filter(({ sampleRateHz, rounds }) => (sampleRateHz === 48_000) !== rounds))(
    'finds clicks below the end of $colour noise of $recordedHz samples a second, converted to $sampleRateHz',
    (noise) => {
      const scene = { ...noise, seconds: 16, seed: 6, clicksPerSecond: 12 };
      const { samples, clicks } = bandLimitedScene(scene);
      const score = compareWithTruth(found(noise, samples), clicks, noise.sampleRateHz);
      expect(score.recall).toBeGreaterThanOrEqual(0.97);
      expect(score.precision).toBeGreaterThanOrEqual(0.94);
      expect(score.medianErrorUs).toBeLessThanOrEqual(50);
    },
    60_000,
  );

  it('finds a burst of 60 kHz in quiet white noise above the end of a louder one', () => {
    const sampleRateHz = 192_000;
    const loud = { recordedHz: 44_100, sampleRateHz, colour: 'white', rounds: false } as const;
    const { samples } = bandLimitedScene({ ...loud, seconds: 3, seed: 8, clicksPerSecond: 0 });
    const normal = seededNormal(seededUniform(9));
    // 30 dB under the density of the louder one.
    const rms = Math.sqrt(((1e-6 / 10_600) * inDb(-30) * sampleRateHz) / 2);
    const noise = samples.map((value) => value + rms * normal());
    expect(found(loud, noise)).toEqual([]);
    const onset = 1.7 * sampleRateHz;
    addClick(noise, { onset, frequencyHz: 60_000, decayS: 5e-4, amplitude: 8 * rms }, sampleRateHz);
    const bursts = found(loud, noise);
    expect(bursts).toHaveLength(1);
    expect(Math.abs(bursts[0]!.onsetSample - onset)).toBeLessThan(5);
  }, 60_000);
});
