import { BANDS_PER_OCTAVE, type OctaveBand } from './band-energy.ts';
import { LONGEST_TEST_CELLS } from './energy-tests.ts';
import {
  WINDOW_CELLS,
  WINDOW_WIDTHS,
  type CellAddition,
  type CellScan,
  type Held,
  type OctaveArithmetic,
} from './octave-arithmetic.ts';

/** Cells of the past that are kept: a window that ends with the block's first cell, and as much before it. */
export const PAST_CELLS = 2 * LONGEST_TEST_CELLS;

/**
 * Running sums over time of the energies of one octave, in multiples of the floor. The sum over any window is made of differences of two of them.
 * Cells are counted from the block's first one.
 */
export class CellSums {
  /** Sums from which a window is a hit, [length][width] as `WINDOW_CELLS` and `WINDOW_WIDTHS` have them. */
  readonly limits: Held<Float64Array>;
  readonly #arithmetic: OctaveArithmetic;
  readonly #sums: Held<Float64Array>;
  readonly #gains: Held<Float64Array>;
  readonly #hits: Held<Int32Array>;
  readonly #addition: CellAddition;
  readonly #scan: CellScan;

  constructor(arithmetic: OctaveArithmetic, band: OctaveBand) {
    this.#arithmetic = arithmetic;
    this.#sums = arithmetic.doubles((PAST_CELLS + band.cellsPerBlock) * BANDS_PER_OCTAVE);
    this.#gains = arithmetic.doubles(BANDS_PER_OCTAVE);
    this.#hits = arithmetic.integers(band.cellsPerBlock * WINDOW_CELLS.length);
    this.limits = arithmetic.doubles(WINDOW_CELLS.length * WINDOW_WIDTHS.length);
    this.limits.values.fill(Infinity);
    const past = PAST_CELLS;
    this.#addition = { energies: band.energies, sums: this.#sums, gains: this.#gains, past };
    this.#scan = { sums: this.#sums, past, limits: this.limits, hits: this.#hits };
  }

  /**
   * Adds up the cells [from, to).
   * @param gains what turns a sub-band's energy into multiples of its floor.
   */
  add(gains: Float64Array, from: number, to: number): void {
    this.#gains.values.set(gains);
    this.#arithmetic.addCells(this.#addition, from, to);
  }

  /** Visits, by rising end, the lengths of windows of which some width exceeds its limit. */
  visitHits(
    range: { from: number; to: number; phase: number; validFrom: number },
    visit: (endCell: number, length: number) => void,
  ): void {
    const count = this.#arithmetic.scanCells(this.#scan, range);
    const hits = this.#hits.values;
    for (let k = 0; k < count; k++) visit(hits[k]! >> 3, hits[k]! & 7);
  }

  /** Sum of the columns [low, high) over the cells [from, to), added up in the order of the scan. */
  sum(low: number, high: number, from: number, to: number): number {
    const sums = this.#sums.values;
    const now = BANDS_PER_OCTAVE * (PAST_CELLS + to - 1);
    const then = BANDS_PER_OCTAVE * (PAST_CELLS + from - 1);
    return sumOfColumns(sums, now, then, low, high);
  }

  /** Sum of each column over the cells [from, to). */
  columnSums(from: number, to: number, into: Float64Array): void {
    const sums = this.#sums.values;
    const now = BANDS_PER_OCTAVE * (PAST_CELLS + to - 1);
    const then = BANDS_PER_OCTAVE * (PAST_CELLS + from - 1);
    for (let column = 0; column < BANDS_PER_OCTAVE; column++)
      into[column] = sums[now + column]! - sums[then + column]!;
  }

  /** Keeps the end of the block as the past of the next one. */
  shift(cells: number): void {
    const from = cells * BANDS_PER_OCTAVE;
    this.#sums.values.copyWithin(0, from, from + PAST_CELLS * BANDS_PER_OCTAVE);
  }
}

function sumOfColumns(sums: Float64Array, now: number, then: number, low: number, high: number): number {
  if (high - low === 1) return sums[now + low]! - sums[then + low]!;
  const middle = (low + high) >> 1;
  return sumOfColumns(sums, now, then, low, middle) + sumOfColumns(sums, now, then, middle, high);
}
