import { CELLS_PER_OCTAVE, LOWEST_EXPONENT, QUANTILE_CELLS } from './spectrum-tables.ts';

/**
 * A quantile over time of each point of a spectrum, from the histograms of `SpectrumTables`. The error is under half a cell,
 * 0.5 dB; values within a cell are taken as evenly spread.
 *
 * @param share 0 to 1. @param frames spectra that were counted. @returns one power per point; zeros without any frame.
 */
export function powerQuantile(counts: Uint32Array, frames: number, share: number): Float64Array {
  const found = new Float64Array(counts.length / QUANTILE_CELLS);
  for (let p = 0; p < found.length; p++) found[p] = quantileAt(counts, p * QUANTILE_CELLS, share * frames);
  return found;
}

function quantileAt(counts: Uint32Array, row: number, rank: number): number {
  let seen = 0;
  for (let cell = 0; cell < QUANTILE_CELLS; cell++) {
    const count = counts[row + cell]!;
    if (count === 0) continue;
    if (seen + count >= rank) return valueInCell(cell, (rank - seen) / count);
    seen += count;
  }
  return 0;
}

/** The lowest cell holds zero as well. */
function valueInCell(cell: number, place: number): number {
  if (cell === 0) return 0;
  const octave = 2 ** (LOWEST_EXPONENT + Math.floor(cell / CELLS_PER_OCTAVE));
  return octave * (1 + ((cell % CELLS_PER_OCTAVE) + place) / CELLS_PER_OCTAVE);
}
