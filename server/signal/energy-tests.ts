import { BANDS_PER_OCTAVE, VALUES_PER_CELL } from './band-energy.ts';
import { WINDOW_CELLS, WINDOW_WIDTHS } from './octave-arithmetic.ts';

/** A sum over the columns [low, high) and the last `cells` cells, taken every `hop` cells. */
export interface EnergyTest {
  readonly low: number;
  readonly high: number;
  /** Values summed. */
  readonly degrees: number;
  readonly cells: number;
  readonly hop: number;
}

/** Cells of the longest test. */
export const LONGEST_TEST_CELLS = WINDOW_CELLS[WINDOW_CELLS.length - 1]!;

/** Values in all that are summed over one, two, four and eight sub-bands. */
const DEGREES: readonly (readonly number[])[] = [
  [8, 16, 32, 64],
  [8, 32],
  [16, 64],
  [32, 64],
];

/**
 * The sums tried in one octave, by length: 8 to 64 values in all.
 *
 * Wide and short sums find short clicks, narrow and long ones find ringing at one frequency. Neighbours overlap by half in
 * both directions.
 * @param leaves sub-bands that are looked at, from below.
 */
export function planEnergyTests(leaves: number, longestCells: number): EnergyTest[][] {
  return WINDOW_CELLS.map((cells) =>
    cells > longestCells
      ? []
      : WINDOW_WIDTHS.flatMap((width, index) => {
          const degrees = VALUES_PER_CELL * width * cells;
          const isTried = DEGREES[index]?.includes(degrees);
          return isTried
            ? lowsOf(width, leaves).map((low) => ({ low, high: low + width, degrees, cells, hop: cells / 2 }))
            : [];
        }),
  );
}

function lowsOf(width: number, leaves: number): number[] {
  const step = Math.max(1, width / 2);
  const count = Math.floor(BANDS_PER_OCTAVE / step);
  return Array.from({ length: count }, (_, k) => k * step).filter((low) => low + width <= leaves);
}
