import { describe, expect, it } from 'vitest';
import { fullScaleThreshold, joinLevels, LevelTracker } from '../../../server/signal/levels.ts';
import { forEachCell } from '../../../server/signal/sample-cells.ts';
import { sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function levelsOf(samples: Float32Array, blockFrames = samples.length, threshold = 1) {
  const { levels, clipped } = joinLevels(0, [partOf(samples, 0, samples.length, blockFrames, threshold)], 0);
  return { levels, places: clipped };
}

function partOf(
  samples: Float32Array,
  startSample: number,
  endSample: number,
  blockFrames = samples.length,
  threshold = 1,
) {
  const tracker = new LevelTracker(threshold, { startSample, endSample });
  for (let from = startSample; from < endSample; from += blockFrames) {
    const to = Math.min(from + blockFrames, endSample);
    forEachCell(samples, { from, to, startSample: from }, (cell, start) => {
      tracker.push(cell, samples, start, start);
    });
  }
  return tracker.finish();
}

/** AES17: a full-scale sine has 0 dB rms, a full-scale square wave +3.01 dB. */
describe('levels', () => {
  it('give a full-scale sine rms 0 dB, peak 0 dB and crest 3.01 dB', () => {
    const { levels } = levelsOf(sine(48_000, 1000, 48_000));
    expect(levels.rmsDb).toBeCloseTo(0, 4);
    expect(levels.peakDb).toBeCloseTo(0, 4);
    expect(levels.crestDb).toBeCloseTo(3.0103, 3);
  });

  it('give a full-scale square wave rms +3.01 dB', () => {
    const square = Float32Array.from({ length: 4800 }, (_, n) => (n % 48 < 24 ? 1 : -1));
    expect(levelsOf(square).levels.rmsDb).toBeCloseTo(3.0103, 4);
  });

  it('give the rounding noise of 16 bits its 98.09 dB under a full-scale sine (6.0206 N + 1.7609)', () => {
    const noise = Float32Array.from({ length: 200_000 }, (_, n) => {
      const x = 0.9 * Math.sin(n * 0.7310585);
      return Math.round(x * 32768) / 32768 - x;
    });
    expect(levelsOf(noise).levels.rmsDb).toBeCloseTo(-98.09, 1);
  });

  it('take the mean out of rms and tell it as a share of full scale', () => {
    const { levels } = levelsOf(sine(48_000, 1000, 48_000, 0.001).map((x) => x + 0.25));
    expect(levels.dcFraction).toBeCloseTo(0.25, 6);
    expect(levels.rmsDb).toBeCloseTo(-60, 2);
  });

  it('are null in silence', () => {
    expect(levelsOf(new Float32Array(100)).levels).toMatchObject({
      rmsDb: null,
      peakDb: null,
      crestDb: null,
      clippedRuns: 0,
    });
  });

  it('do not depend on how the samples are cut into blocks', () => {
    const samples = whiteNoiseSignal(10_000, 0.4, 3).map((x) => Math.max(-1, Math.min(1, x)));
    const whole = levelsOf(samples).levels;
    const cut = levelsOf(samples, 7).levels;
    expect(cut.clippedSamples).toBe(whole.clippedSamples);
    expect(cut.clippedRuns).toBe(whole.clippedRuns);
    expect(cut.rmsDb).toBeCloseTo(whole.rmsDb!, 9);
  });
});

describe('levels of segments', () => {
  it('join to those of the whole, with clipped runs that cross the ends of segments', () => {
    const samples = whiteNoiseSignal(9000, 0.3, 5).map((x) => Math.max(-1, Math.min(1, x)));
    samples.fill(1, 2990, 6010);
    samples[7000] = -1;
    samples[7001] = -1;
    samples[8001] = 0;
    samples[8000] = 1;
    samples[7999] = 0;
    const whole = levelsOf(samples);
    const ends = [0, 3000, 6000, 7001, 8000, 9000];
    const parts = ends.slice(1).map((end, index) => partOf(samples, ends[index]!, end));
    const { levels, clipped } = joinLevels(0, parts, 0);
    expect(clipped).toEqual(whole.places);
    expect(clipped.spans).toContainEqual({ startSample: 2990, endSample: 6010 });
    expect(levels.clippedSamples).toBe(whole.levels.clippedSamples);
    expect(levels.rmsDb).toBeCloseTo(whole.levels.rmsDb!, 9);
    expect(levels.peakDb).toBe(whole.levels.peakDb);
  });
});

describe('clipping', () => {
  it('is two samples or more at full scale on one side; the end of a place is exclusive', () => {
    const samples = Float32Array.from([0, 1, 1, 1, 0, 1, 0, -1, -1, 0, 1, -1, 0]);
    const { levels, places } = levelsOf(samples, 3);
    expect(levels.clippedRuns).toBe(2);
    expect(levels.clippedSamples).toBe(5);
    expect(places.spans).toEqual([
      { startSample: 1, endSample: 4 },
      { startSample: 7, endSample: 9 },
    ]);
  });

  it('is seen at the last sample', () => {
    expect(levelsOf(Float32Array.from([0, 1, 1])).levels.clippedRuns).toBe(1);
  });

  it('counts the largest positive code of an integer format as full scale', () => {
    expect(fullScaleThreshold('integer', 16)).toBe(32767 / 32768);
    expect(fullScaleThreshold('integer', 8)).toBe(127 / 128);
    expect(fullScaleThreshold('float', 32)).toBe(1);
    const largest = new Float32Array(2).fill(2147483647 / 2147483648);
    expect(levelsOf(largest, 2, fullScaleThreshold('integer', 32)).levels.clippedRuns).toBe(1);
  });
});
