import { BANDS_PER_OCTAVE } from './band-energy.ts';

/** A sum over sub-bands [low, high) and the last `cells` cells, taken every `hop` cells, a power of two. */
export interface EnergyTest {
  readonly low: number;
  readonly high: number;
  readonly cells: number;
  readonly hop: number;
}

const LEAST_DEGREES = 8;
const MOST_DEGREES = 64;

/**
 * The sums tried in one octave: one, two, four or all eight neighbouring sub-bands, 8 to 64 cells in all.
 *
 * Wide and short sums find short clicks, narrow and long ones find ringing at one frequency. Neighbours overlap by half in
 * both directions.
 */
export function planEnergyTests(leaves: number, longestCells: number): EnergyTest[] {
  const tests: EnergyTest[] = [];
  for (let width = BANDS_PER_OCTAVE; width >= 1; width /= 2) {
    const step = Math.max(1, width / 2);
    for (let low = 0; low === 0 || low + width <= leaves; low += step) {
      const high = Math.min(leaves, low + width);
      for (let degrees = LEAST_DEGREES; degrees <= MOST_DEGREES; degrees *= 2) {
        const cells = degrees / width;
        if (cells <= longestCells) tests.push({ low, high, cells, hop: Math.max(1, cells / 2) });
      }
    }
  }
  return tests;
}
