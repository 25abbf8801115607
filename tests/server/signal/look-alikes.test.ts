import { readFileSync } from 'node:fs';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import {
  descriptorNames,
  featureCount,
  scaleDescriptors,
  type CandidateDescriptors,
} from '../../../server/signal/look-alike-features.ts';
import { findLookAlikes, joinCentres, mostMembers } from '../../../server/signal/look-alikes.ts';

interface Reference {
  cases: { spread: number; labels: number[]; randToPlanted: number }[];
  snrMedian: number;
  snrSigma: number;
}

// Made by tests/reference/look-alikes.py with numpy and scipy (their versions stand in the file).
const reference = JSON.parse(
  readFileSync(new URL('../../reference/look-alikes.json', import.meta.url), 'utf8'),
) as Reference;

/** The numbers of the script. */
function numbers(seed: number): () => number {
  let state = seed;
  return () => {
    state = (Math.imul(1_664_525, state) + 1_013_904_223) >>> 0;
    return (state >>> 8) / 2 ** 24;
  };
}

function plantedRows(spread: number, rows = 72): number[][] {
  const draw = numbers(2026);
  const middles = Array.from({ length: 5 }, () => Array.from({ length: featureCount }, () => 6 * draw()));
  return Array.from({ length: rows }, (_row, n) =>
    middles[n % 5]!.map((middle) => middle + spread * (draw() - 0.5)),
  );
}

/** Hubert and Arabie (1985), eq. 5. */
function adjustedRand(a: ArrayLike<number>, b: ArrayLike<number>): number {
  const pairs = (counts: Iterable<number>) => [...counts].reduce((sum, n) => sum + (n * (n - 1)) / 2, 0);
  const tally = (keyOf: (n: number) => string) => {
    const counts = new Map<string, number>();
    for (let n = 0; n < a.length; n++) counts.set(keyOf(n), (counts.get(keyOf(n)) ?? 0) + 1);
    return pairs(counts.values());
  };
  const rows = tally((n) => `${a[n]}`);
  const columns = tally((n) => `${b[n]}`);
  const chance = (rows * columns) / pairs([a.length]);
  return (tally((n) => `${a[n]} ${b[n]}`) - chance) / ((rows + columns) / 2 - chance);
}

function labelsOf(rows: Float64Array): Int32Array {
  const labels = new Int32Array(rows.length / featureCount).fill(-1);
  findLookAlikes(rows).forEach(({ members }, group) => {
    for (const place of members) labels[place] = group;
  });
  return labels;
}

function descriptors(count: number, facts: Partial<Record<string, (n: number) => number>>) {
  const columns = descriptorNames.map((name) => [
    name,
    Float64Array.from({ length: count }, (_value, n) => facts[name]?.(n) ?? NaN),
  ]);
  return Object.fromEntries(columns) as unknown as CandidateDescriptors;
}

describe('the scale of descriptors', () => {
  it('is the median and 1.4826 times the median absolute deviation of numpy and scipy', () => {
    const draw = numbers(7);
    const snr = Array.from({ length: 41 }, () => 10 + 8 * draw());
    const column = descriptorNames.indexOf('snrDb');
    const rows = scaleDescriptors(descriptors(41, { snrDb: (n) => snr[n]! }));
    snr.forEach((value, n) =>
      expect(rows[n * featureCount + column]).toBeCloseTo(
        (value - reference.snrMedian) / reference.snrSigma,
        9,
      ),
    );
  });

  it('puts an octave as far from an octave at 5 kHz as at 200 kHz', () => {
    const hz = [5_000, 10_000, 100_000, 200_000];
    const rows = scaleDescriptors(descriptors(4, { peakFrequencyHz: (n) => hz[n]! }));
    const at = (n: number) => rows[n * featureCount]!;
    expect(at(1) - at(0)).toBeCloseTo(at(3) - at(2), 9);
  });

  it('puts what is not told in the middle, and equal values nowhere else', () => {
    const rows = scaleDescriptors(descriptors(3, { snrDb: () => 12 }));
    expect([...rows]).toEqual(new Array(3 * featureCount).fill(0));
  });
});

describe('centres that are joined', () => {
  it.each(reference.cases)('are those of scipy with a spread of $spread', ({ spread, labels }) => {
    const groups = joinCentres(plantedRows(spread));
    expect(new Set(groups).size).toBe(new Set(labels).size);
    expect(adjustedRand(groups, labels)).toBeCloseTo(1, 12);
  });
});

describe('groups of look-alikes', () => {
  it('are the planted families, by the adjusted Rand index', () => {
    const rows = Float64Array.from(plantedRows(1, 900).flat());
    expect(
      adjustedRand(
        labelsOf(rows),
        Float64Array.from({ length: 900 }, (_v, n) => n % 5),
      ),
    ).toBeCloseTo(1, 12);
  });

  it('begin with the example, then the member least like it, then drawn ones', () => {
    const rows = Float64Array.from(plantedRows(1, 170).flat());
    const distance = (a: number, b: number) =>
      Math.hypot(
        ...Array.from(
          { length: featureCount },
          (_v, c) => rows[a * featureCount + c]! - rows[b * featureCount + c]!,
        ),
      );
    for (const { members, spotChecks } of findLookAlikes(rows)) {
      const [example, farthest, ...others] = members as unknown as [number, number, ...number[]];
      expect(members).toHaveLength(34);
      expect(spotChecks).toBe(4);
      for (const other of others)
        expect(distance(example, other)).toBeLessThanOrEqual(distance(example, farthest));
      const sum = (place: number) => [...members].reduce((total, other) => total + distance(place, other), 0);
      for (const other of members) expect(sum(example)).toBeLessThanOrEqual(sum(other) + 1e-9);
    }
  });

  it('hold every candidate once, are small enough to be answered at once, and come out the same again', () => {
    const value = fc.double({ min: -12, max: 12, noNaN: true });
    fc.assert(
      fc.property(fc.array(fc.array(value, { minLength: 8, maxLength: 8 }), { maxLength: 40 }), (points) => {
        const rows = Float64Array.from(points.flat());
        const groups = findLookAlikes(rows);
        const places = groups.flatMap(({ members }) => [...members]).sort((a, b) => a - b);
        expect(places).toEqual(points.map((_point, place) => place));
        for (const { members, spotChecks } of groups) {
          expect(members.length).toBeLessThanOrEqual(mostMembers);
          expect(spotChecks).toBeLessThan(members.length);
        }
        expect(findLookAlikes(rows)).toEqual(groups);
      }),
      { numRuns: 60 },
    );
  });

  it('part a thousand equal candidates so that each part has its own spot checks', () => {
    const groups = findLookAlikes(new Float64Array(1000 * featureCount));
    expect(groups.map(({ members }) => members.length)).toEqual([200, 200, 200, 200, 200]);
    expect(groups.every(({ spotChecks, coherence }) => spotChecks === 7 && coherence === 1)).toBe(true);
  });

  it('are none without candidates', () => {
    expect(findLookAlikes(new Float64Array(0))).toEqual([]);
  });
});
