import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { addCounts, packCounts } from '../../../server/signal/packed-counts.ts';
import { QUANTILE_CELLS } from '../../../server/signal/spectrum-tables.ts';

/** Histograms of some points, each with a few cells that hold something. */
const histograms = fc
  .array(fc.dictionary(fc.nat(QUANTILE_CELLS - 1).map(String), fc.nat(1e6), { maxKeys: 5 }), { maxLength: 6 })
  .map((points) => {
    const counts = new Uint32Array(points.length * QUANTILE_CELLS);
    points.forEach((cells, p) =>
      Object.entries(cells).forEach(([cell, count]) => (counts[p * QUANTILE_CELLS + Number(cell)] = count)),
    );
    return counts;
  });

describe('packed histograms', () => {
  it('add what was packed to what is there', () => {
    fc.assert(
      fc.property(histograms, (counts) => {
        const sums = new Uint32Array(counts.length).fill(7);
        addCounts(packCounts(counts), sums);
        expect(sums).toEqual(counts.map((count) => count + 7));
      }),
    );
  });

  it('hold no empty cells at either end', () => {
    const counts = new Uint32Array(2 * QUANTILE_CELLS);
    counts[QUANTILE_CELLS + 40] = 3;
    counts[QUANTILE_CELLS + 42] = 5;
    expect(packCounts(counts)).toEqual({
      firstCells: Uint16Array.of(0, 40),
      lengths: Uint16Array.of(0, 3),
      counts: Uint32Array.of(3, 0, 5),
    });
  });
});
