import { describe, expect, it } from 'vitest';
import { fullScaleThreshold, LevelTracker } from '../../../server/signal/levels.ts';
import { forEachCell } from '../../../server/signal/sample-cells.ts';
import { sine, whiteNoiseSignal } from '../../support/wav/signals.ts';

function levelsOf(samples: Float32Array, blockFrames = samples.length, threshold = 1) {
  const tracker = new LevelTracker(threshold);
  for (let from = 0; from < samples.length; from += blockFrames) {
    const to = Math.min(from + blockFrames, samples.length);
    forEachCell(samples, { from, to, startSample: from }, (cell, start) => {
      tracker.push(cell, samples, start, start);
    });
  }
  return { levels: tracker.finish(0, 0), places: tracker.clippedPlaces };
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
