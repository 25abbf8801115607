import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { createDetector, expectedByChance } from '../../../server/signal/detector.ts';
import { detectedCandidateSchema, type DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { compareWithTruth } from './click-truth.ts';
import { detectAll } from './detect.ts';
import { addClick, clickScene, seededNormal, seededUniform, type SceneOptions } from './synthetic-clicks.ts';

function detect(samples: Float32Array, sampleRateHz: number, blockSamples?: number): DetectedCandidate[] {
  return detectAll(samples, { sampleRateHz, ...(blockSamples && { blockSamples }) }).found;
}

const scene: SceneOptions = {
  sampleRateHz: 192_000,
  seconds: 6,
  seed: 11,
  ratePerSecond: 15,
  snrDb: [15, 35],
  frequencyHz: [5000, 75_000],
  cycles: [15, 60],
};

function scoreOf(options: SceneOptions) {
  const { samples, clicks } = clickScene(options);
  return compareWithTruth(detect(samples, options.sampleRateHz), clicks, options.sampleRateHz);
}

describe('detector against damped sines of known onset in pink noise and hum', () => {
  it.each([
    [48_000, [4000, 16_000], 50],
    [192_000, [4000, 16_000], 50],
    [192_000, [25_000, 75_000], 50],
    [500_000, [25_000, 200_000], 20],
  ] as const)(
    'at %d samples a second from 15 dB up it misses and invents at most 2 in 100',
    (sampleRateHz, [low, high], errorUs) => {
      const seconds = sampleRateHz > 400_000 ? 4 : 8;
      const score = scoreOf({ ...scene, sampleRateHz, seconds, frequencyHz: [low, high] });
      expect(score.recall).toBeGreaterThanOrEqual(0.98);
      expect(score.precision).toBeGreaterThanOrEqual(0.98);
      expect(score.medianErrorUs).toBeLessThanOrEqual(errorUs);
    },
    60_000,
  );

  it('finds nine of ten between 10 and 15 dB', () => {
    const score = scoreOf({ ...scene, seconds: 10, snrDb: [10, 15] });
    expect(score.recall).toBeGreaterThanOrEqual(0.9);
    expect(score.precision).toBeGreaterThanOrEqual(0.9);
    expect(score.medianErrorUs).toBeLessThanOrEqual(100);
  }, 60_000);

  it('parts clicks whose onsets lie 1 to 3 ms apart', () => {
    const overlapping = {
      snrDb: [20, 30],
      frequencyHz: [6000, 75_000],
      cycles: [8, 20],
      longestDecayS: 0.001,
      followedAfterS: [0.001, 0.003],
    } as const;
    const score = scoreOf({ ...scene, seconds: 8, ratePerSecond: 10, ...overlapping });
    expect(score.recall).toBeGreaterThanOrEqual(0.9);
    expect(score.precision).toBeGreaterThanOrEqual(0.95);
  }, 60_000);

  it('finds nothing in half a minute of hum and noise alone', () => {
    const { samples } = clickScene({ ...scene, sampleRateHz: 96_000, seconds: 30, ratePerSecond: 0 });
    expect(detect(samples, 96_000)).toEqual([]);
    expect(expectedByChance(600)).toBeLessThanOrEqual(2);
  }, 60_000);
});

describe('detector where a recording begins', () => {
  it.each([
    ['white', 40],
    ['pink', 12],
  ] as const)(
    'takes no chance sample of %s noise for a burst, %d times',
    (colour, times) => {
      const sampleRateHz = 192_000;
      const startingWith = (seed: number) => {
        if (colour === 'pink') return clickScene({ ...scene, seconds: 0.6, ratePerSecond: 0, seed }).samples;
        const normal = seededNormal(seededUniform(seed));
        return Float32Array.from({ length: 0.6 * sampleRateHz }, () => 0.01 * normal());
      };
      const found = Array.from({ length: times }, (_, seed) => detect(startingWith(seed + 1), sampleRateHz));
      expect(found.flat().map(({ onsetSample }) => onsetSample)).toEqual([]);
    },
    60_000,
  );

  it('finds a click right behind the first sample', () => {
    const { samples } = clickScene({ ...scene, seconds: 2, ratePerSecond: 0 });
    addClick(samples, { onset: 60, frequencyHz: 30_000, decayS: 0.001, amplitude: 0.03 }, scene.sampleRateHz);
    const found = detect(samples, scene.sampleRateHz);
    expect(found).toHaveLength(1);
    expect(Math.abs((found[0]?.onsetSample ?? 0) - 60)).toBeLessThan(20);
  });
});

describe('detector where the background changes', () => {
  const { samples } = clickScene({ ...scene, seconds: 5, ratePerSecond: 0 });
  const normal = seededNormal(seededUniform(8));
  const from = 2 * scene.sampleRateHz;

  it('takes a tone that is switched on for one burst, however long it lasts', () => {
    const withTone = samples.map((value, n) => value + (n >= from ? 0.05 * Math.sin(1.1 * n) : 0));
    const found = detect(withTone, scene.sampleRateHz);
    expect(found).toHaveLength(1);
    expect(Math.abs((found[0]?.onsetSample ?? 0) - from)).toBeLessThan(10);
  });

  it('takes noise that grows by 10 dB for a handful of bursts until the floor has followed', () => {
    const louder = samples.map((value, n) => value + (n >= from ? 0.006 * normal() : 0));
    const found = detect(louder, scene.sampleRateHz);
    expect(found.length).toBeGreaterThan(0);
    expect(found.length).toBeLessThan(8);
    expect(found.every(({ onsetSample }) => onsetSample < from + scene.sampleRateHz)).toBe(true);
  });
});

describe('detector as a stream', () => {
  it('gives the same candidates however the samples are cut', () => {
    const { samples } = clickScene({ ...scene, seconds: 2.5, ratePerSecond: 20 });
    const whole = detect(samples, scene.sampleRateHz);
    expect(whole.length).toBeGreaterThan(20);
    fc.assert(
      fc.property(fc.integer({ min: 100, max: 300_000 }), (blockSamples) => {
        expect(detect(samples, scene.sampleRateHz, blockSamples)).toEqual(whole);
      }),
      { numRuns: 6 },
    );
  }, 60_000);

  it('gives candidates that the contract accepts, by rising onset, each ending after it began', () => {
    const { samples } = clickScene({ ...scene, seconds: 3 });
    const found = detect(samples, scene.sampleRateHz);
    expect(found.length).toBeGreaterThan(10);
    for (const [at, candidate] of found.entries()) {
      expect(() => detectedCandidateSchema.parse(candidate)).not.toThrow();
      expect(candidate.endSample).toBeGreaterThan(candidate.onsetSample);
      expect(candidate.onsetSample).toBeGreaterThanOrEqual(found[at - 1]?.onsetSample ?? 0);
    }
  });

  it('hands candidates on while the stream runs and says up to where they are complete', () => {
    const { samples } = clickScene({ ...scene, seconds: 4 });
    const context = { fullScaleV: null, preampGainDb: null, observableLowHz: 0, observableHighHz: 86_400 };
    const detector = createDetector({ sampleRateHz: scene.sampleRateHz, channel: 0, context });
    detector.push(samples);
    const early = detector.take();
    const settled = detector.settledSample();
    expect(settled).toBeGreaterThan(3 * scene.sampleRateHz);
    expect(early.length).toBeGreaterThan(20);
    for (const late of detector.finish()) expect(late.onsetSample).toBeGreaterThanOrEqual(settled);
  });

  it('finds a click whose ringing the end of the recording cuts off', () => {
    const { samples } = clickScene({ ...scene, seconds: 2, ratePerSecond: 0 });
    const onset = samples.length - 400;
    addClick(samples, { onset, frequencyHz: 40_000, decayS: 0.001, amplitude: 0.03 }, scene.sampleRateHz);
    const found = detect(samples, scene.sampleRateHz);
    expect(found).toHaveLength(1);
    expect(Math.abs((found[0]?.onsetSample ?? 0) - onset)).toBeLessThan(5);
    expect(found[0]?.endSample).toBeLessThanOrEqual(samples.length);
  });

  it.each([0, 1, 50, 3000])('bears a recording of %d samples', (count) => {
    expect(
      detect(
        Float32Array.from({ length: count }, (_, n) => 0.001 * Math.sin(n)),
        192_000,
      ).length,
    ).toBeLessThan(2);
  });

  it.each([100, 8000, 20_000_000])('bears a rate of %d and digital silence', (sampleRateHz) => {
    expect(detect(new Float32Array(200_000), sampleRateHz)).toEqual([]);
  });

  it('refuses a rate of 0', () => {
    expect(() => detect(new Float32Array(1), 0)).toThrow(RangeError);
  });
});

describe('parameters of detected bursts', () => {
  it('are those of the click, not of the hum it lies under', () => {
    const { samples } = clickScene({ ...scene, seconds: 2, ratePerSecond: 0 });
    addClick(
      samples,
      { onset: 250_000, frequencyHz: 60_000, decayS: 0.0005, amplitude: 0.02 },
      scene.sampleRateHz,
    );
    const [burst] = detect(samples, scene.sampleRateHz);
    expect(burst?.hearingClass).toBe('above');
    expect(Math.abs((burst?.peakFrequencyHz ?? 0) - 60_000)).toBeLessThan(500);
    expect(Math.abs((burst?.peakDb ?? 0) - 20 * Math.log10(0.02))).toBeLessThan(2);
  });

  it('clipping is seen in the samples as recorded', () => {
    const { samples } = clickScene({ ...scene, seconds: 2, ratePerSecond: 0 });
    addClick(samples, { onset: 250_000, frequencyHz: 9000, decayS: 0.001, amplitude: 3 }, scene.sampleRateHz);
    const clipped = samples.map((value) => Math.max(-1, Math.min(1, value)));
    expect(detect(clipped, scene.sampleRateHz)[0]).toMatchObject({ clipped: true });
  });
});
