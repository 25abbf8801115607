import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { blockPrice, findActiveSpans, poissonTail, rateBlocks } from '../../../server/signal/active-spans.ts';
import { seededUniform } from './synthetic-clicks.ts';

/** Counts of a Poisson process by its waiting times. */
function poissonCounts(ratesPerStep: readonly number[], seed: number): number[] {
  const uniform = seededUniform(seed);
  return ratesPerStep.map((rate) => {
    let count = 0;
    for (let gone = -Math.log(uniform()); gone < rate; gone -= Math.log(uniform())) count += 1;
    return count;
  });
}

const fitness = (count: number, seconds: number) => (count > 0 ? count * Math.log(count / seconds) : 0);

/** The best sum over every possible cutting, by trying them all. */
function bestByTrial(counts: readonly number[]): number {
  const price = blockPrice(counts.reduce((sum, count) => sum + count, 0));
  let best = -Infinity;
  for (let cuts = 0; cuts < 2 ** (counts.length - 1); cuts++) {
    let value = 0;
    let start = 0;
    for (let end = 1; end <= counts.length; end++) {
      if (end < counts.length && !(cuts & (1 << (end - 1)))) continue;
      const count = counts.slice(start, end).reduce((sum, n) => sum + n, 0);
      value += fitness(count, end - start) - price;
      start = end;
    }
    best = Math.max(best, value);
  }
  return best;
}

describe('blocks of constant rate', () => {
  it('are the best of all cuttings', () => {
    fc.assert(
      fc.property(fc.array(fc.integer({ min: 0, max: 40 }), { minLength: 1, maxLength: 9 }), (counts) => {
        const blocks = rateBlocks(
          counts,
          counts.map(() => 1),
        );
        const price = blockPrice(counts.reduce((sum, count) => sum + count, 0));
        const value = blocks.reduce((sum, { count, seconds }) => sum + fitness(count, seconds) - price, 0);
        expect(value).toBeCloseTo(bestByTrial(counts), 9);
        expect(blocks.map(({ start }) => start)).toEqual([0, ...blocks.slice(0, -1).map(({ end }) => end)]);
      }),
    );
  });

  it('of a steady rate are one in at least nine of ten', () => {
    const seeds = Array.from({ length: 40 }, (_, k) => k + 1);
    const uncut = seeds.filter((seed) => {
      const counts = poissonCounts(new Array<number>(300).fill(1.5), seed);
      return (
        rateBlocks(
          counts,
          counts.map(() => 1),
        ).length === 1
      );
    });
    expect(uncut.length).toBeGreaterThanOrEqual(36);
  });

  // Scargle et al. 2013, eq. 21: 4 - ln(73.53 x 0.05 x 100^-0.478) = 4.89931, computed outside the project.
  it('cost what the source says', () => {
    expect(blockPrice(100)).toBeCloseTo(4.89931, 4);
  });
});

describe('active spans', () => {
  const recording = {
    samplesPerStep: 10_000,
    frames: 10_000_000,
    sampleRateHz: 100_000,
    expectedByChance: 0.2,
  };
  const quietThenBusy = (k: number) => (k >= 400 && k < 460 ? 3 : 0.02);

  it('is the stretch of freezing in a quiet recording, within a few steps', () => {
    const perStep = poissonCounts(
      Array.from({ length: 1000 }, (_, k) => quietThenBusy(k)),
      5,
    );
    const [span, ...others] = findActiveSpans({ ...recording, perStep });
    expect(others).toEqual([]);
    expect(Math.abs((span?.startSample ?? 0) - 4_000_000)).toBeLessThan(30_000);
    expect(Math.abs((span?.endSample ?? 0) - 4_600_000)).toBeLessThan(30_000);
    expect(span?.ratePerS).toBeGreaterThan(24);
    expect(span?.expectedByChance).toBeCloseTo(0.012, 3);
  });

  it('is the whole where bursts come at one rate from beginning to end', () => {
    const perStep = poissonCounts(new Array<number>(1000).fill(1), 6);
    const spans = findActiveSpans({ ...recording, perStep });
    expect(spans.map(({ startSample, endSample }) => [startSample, endSample])).toEqual([[0, 10_000_000]]);
  });

  it('is none where there are no more candidates than chance gives', () => {
    expect(findActiveSpans({ ...recording, perStep: new Uint32Array(1000) })).toEqual([]);
    const one = new Uint32Array(1000);
    one[500] = 1;
    expect(findActiveSpans({ ...recording, perStep: one, expectedByChance: 1 })).toEqual([]);
  });

  it('ends with the recording where the last step is short', () => {
    const perStep = [0, 0, 0, 0, 50, 50, 40];
    const [span] = findActiveSpans({ ...recording, perStep, frames: 65_000 });
    expect(span).toMatchObject({ startSample: 40_000, endSample: 65_000, candidates: 140 });
    expect(span?.ratePerS).toBeCloseTo(140 / 0.25, 6);
  });

  it('are at most fifty', () => {
    const perStep = Array.from({ length: 1000 }, (_, k) => (k % 10 === 0 ? 300 : 0));
    expect(findActiveSpans({ ...recording, perStep })).toHaveLength(50);
  });
});

describe('tail of the Poisson distribution', () => {
  // scipy.stats.poisson.sf(n - 1, mean).
  it('is that of scipy', () => {
    expect(poissonTail(3, 1)).toBeCloseTo(0.0803014, 6);
    expect(poissonTail(10, 2.5)).toBeCloseTo(0.0002774, 6);
    expect(poissonTail(0, 2)).toBe(1);
    expect(poissonTail(1, 0)).toBe(0);
  });
});
