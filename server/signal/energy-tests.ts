import { BANDS_PER_OCTAVE, VALUES_PER_CELL } from './band-energy.ts';

/** A sum over one column and the last `cells` cells, taken every `hop` cells, a power of two. */
export interface EnergyTest {
  /** Which of the columns of neighbouring sub-bands, see `planColumns`. */
  readonly column: number;
  readonly low: number;
  readonly high: number;
  readonly degrees: number;
  readonly cells: number;
  readonly hop: number;
}

/** Neighbouring sub-bands [low, high) whose energies are added up; a wide one is the sum of two narrower ones. */
export interface Column {
  readonly low: number;
  readonly high: number;
  readonly parts: readonly [number, number] | null;
}

/** Values in all that are summed over one, two, four and eight sub-bands. */
const DEGREES: readonly (readonly number[])[] = [
  [8, 16, 32, 64],
  [8, 32],
  [16, 64],
  [32, 64],
];
const MOST_DEGREES = 64;
/** Cells of the longest test. */
export const LONGEST_TEST_CELLS = MOST_DEGREES / VALUES_PER_CELL;

/** Columns of one, two, four and eight neighbouring sub-bands, the wide ones overlapping by half. */
export function planColumns(leaves: number): Column[] {
  const columns: Column[] = Array.from({ length: leaves }, (_, low) => ({ low, high: low + 1, parts: null }));
  for (let width = 2; width <= BANDS_PER_OCTAVE; width *= 2) {
    const half = width / 2;
    for (let low = 0; low + width <= leaves; low += half) {
      const lower = columns.findIndex((column) => column.low === low && column.high === low + half);
      const upper = columns.findIndex((column) => column.low === low + half && column.high === low + width);
      columns.push({ low, high: low + width, parts: [lower, upper] });
    }
  }
  return columns;
}

/**
 * The sums tried in one octave: every column, 8 to 64 values in all.
 *
 * Wide and short sums find short clicks, narrow and long ones find ringing at one frequency. Neighbours overlap by half in
 * both directions.
 */
export function planEnergyTests(columns: readonly Column[], longestCells: number): EnergyTest[] {
  return columns.flatMap(({ low, high }, column) => {
    const tests: EnergyTest[] = [];
    for (const degrees of DEGREES[Math.log2(high - low)] ?? []) {
      const cells = degrees / (high - low) / VALUES_PER_CELL;
      if (cells <= longestCells) tests.push({ column, low, high, degrees, cells, hop: cells / 2 });
    }
    return tests;
  });
}
