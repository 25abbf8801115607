import { type OctaveBand, VALUES_PER_CELL } from './band-energy.ts';
import { type Column, LONGEST_TEST_CELLS } from './energy-tests.ts';

/** Cells of the past that are kept: a window that ends with the block's first cell, and as much before it. */
export const PAST_CELLS = 2 * LONGEST_TEST_CELLS;

/**
 * Running sums over time of the energies of one octave, in multiples of the floor, for every column of neighbouring
 * sub-bands. The sum over any window is the difference of two of them.
 */
export class CellSums {
  /** [column][PAST_CELLS + cell]: sum up to and with the cell. */
  readonly values: Float64Array;
  readonly stride: number;
  readonly #band: OctaveBand;
  readonly #columns: readonly Column[];

  constructor(band: OctaveBand, columns: readonly Column[]) {
    this.#band = band;
    this.#columns = columns;
    this.stride = PAST_CELLS + band.cellsPerBlock;
    this.values = new Float64Array(columns.length * this.stride);
  }

  /**
   * Adds up the cells [from, to) of the block.
   * @param gains what turns a sub-band's energy into multiples of its floor.
   */
  add(gains: Float64Array, from: number, to: number): void {
    const { values, stride } = this;
    const { energies, cellsPerBlock } = this.#band;
    for (let column = 0; column < this.#columns.length; column++) {
      const { low, parts } = this.#columns[column]!;
      const write = column * stride + PAST_CELLS;
      if (parts)
        join(values, parts[0] * stride + PAST_CELLS, parts[1] * stride + PAST_CELLS, write, from, to);
      else accumulate(energies, VALUES_PER_CELL * low * cellsPerBlock, gains[low]!, values, write, from, to);
    }
  }

  /** Keeps the end of the block as the past of the next one. */
  shift(cells: number): void {
    for (let at = 0; at < this.values.length; at += this.stride)
      this.values.copyWithin(at, at + cells, at + cells + PAST_CELLS);
  }
}

function accumulate(
  energies: Float64Array,
  read: number,
  gain: number,
  sums: Float64Array,
  write: number,
  from: number,
  to: number,
): void {
  let sum = sums[write + from - 1]!;
  for (let cell = from; cell < to; cell++) {
    sum += (energies[read + 2 * cell]! + energies[read + 2 * cell + 1]!) * gain;
    sums[write + cell] = sum;
  }
}

function join(
  sums: Float64Array,
  lower: number,
  upper: number,
  write: number,
  from: number,
  to: number,
): void {
  for (let cell = from; cell < to; cell++) sums[write + cell] = sums[lower + cell]! + sums[upper + cell]!;
}
