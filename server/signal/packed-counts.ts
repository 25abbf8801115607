import { QUANTILE_CELLS } from './spectrum-tables.ts';

/** Histograms without the empty cells at both ends, which are most of them; plain data. */
export interface PackedCounts {
  /** Of each point: its first cell that holds something, and how many cells follow from there. */
  firstCells: Uint16Array;
  lengths: Uint16Array;
  /** Point after point. */
  counts: Uint32Array;
}

/** @param counts of point p from `p * QUANTILE_CELLS`. */
export function packCounts(counts: Uint32Array): PackedCounts {
  const points = counts.length / QUANTILE_CELLS;
  const firstCells = new Uint16Array(points);
  const lengths = new Uint16Array(points);
  for (let p = 0; p < points; p++) {
    const histogram = counts.subarray(p * QUANTILE_CELLS, (p + 1) * QUANTILE_CELLS);
    const first = histogram.findIndex((count) => count > 0);
    if (first < 0) continue;
    firstCells[p] = first;
    lengths[p] = histogram.findLastIndex((count) => count > 0) + 1 - first;
  }
  const packed = new Uint32Array(lengths.reduce((sum, length) => sum + length, 0));
  for (let p = 0, at = 0; p < points; at += lengths[p++]!) {
    const from = p * QUANTILE_CELLS + firstCells[p]!;
    packed.set(counts.subarray(from, from + lengths[p]!), at);
  }
  return { firstCells, lengths, counts: packed };
}

/** Adds packed histograms to whole ones. */
export function addCounts({ firstCells, lengths, counts }: PackedCounts, sums: Uint32Array): void {
  for (let p = 0, at = 0; p < lengths.length; p++) {
    const from = p * QUANTILE_CELLS + firstCells[p]!;
    for (let cell = from; cell < from + lengths[p]!; cell++) sums[cell]! += counts[at++]!;
  }
}
