import { HALF_SAMPLES_PER_CELL, type OctaveBand } from './band-energy.ts';
import { PAST_CELLS } from './cell-sums.ts';
import { chiSquareThreshold } from './chi-square.ts';
import { BOTH_HALVES, ONE_BAND, ONE_BAND_LONG, ONE_HALF, TWO_BANDS } from './sine-windows.ts';
import type { EnergyTest } from './energy-tests.ts';
import { HALF_WINDOWS, type HalfScan, type OctaveArithmetic } from './octave-arithmetic.ts';

/** A window whose energy passes a low threshold. Cells count from the begin of the stream, with fractions. */
export interface WeakSpot {
  readonly kind: number;
  readonly lowHz: number;
  readonly highHz: number;
  readonly firstCell: number;
  lastCell: number;
  /** Sum over its threshold: what is dropped first where there are too many. */
  readonly strength: number;
}

interface WeakSpotsOptions {
  readonly arithmetic: OctaveArithmetic;
  readonly band: OctaveBand;
  readonly leaves: number;
  readonly chance: number;
}

/** Steps of four samples of a half. */
const STEPS_PER_CELL = HALF_SAMPLES_PER_CELL / 4;
const DEGREES = 8;
const LONG_DEGREES = 16;
const MOST_PER_BLOCK = 16;

/** Weak spots of one octave: collected per block, joined where windows overlap, none where a region is active. */
export class WeakSpots {
  readonly #arithmetic: OctaveArithmetic;
  readonly #halves: HalfScan;
  readonly #band: OctaveBand;
  readonly #leaves: number;
  readonly #threshold: number;
  readonly #longThreshold: number;
  #collected: WeakSpot[] = [];
  #ready: WeakSpot[] = [];
  #leftOut: (readonly [start: number, end: number])[] = [];

  constructor({ arithmetic, band, leaves, chance }: WeakSpotsOptions) {
    this.#arithmetic = arithmetic;
    this.#band = band;
    this.#leaves = leaves;
    const { lowerHalf, upperHalf, cellsPerBlock } = band;
    const hits = arithmetic.integers(STEPS_PER_CELL * cellsPerBlock * Object.keys(HALF_WINDOWS).length);
    this.#halves = { lowerHalf, upperHalf, hits };
    this.#threshold = chiSquareThreshold(DEGREES, chance);
    this.#longThreshold = chiSquareThreshold(LONG_DEGREES, chance);
  }

  /** Sum from which a test's window is a weak spot; Infinity for tests that are not asked. */
  thresholdOf({ low, high, degrees }: EnergyTest): number {
    if (degrees === DEGREES && high - low <= 2) return this.#threshold;
    return degrees === LONG_DEGREES && high - low === 1 ? this.#longThreshold : Infinity;
  }

  /** @param cell end of the window. */
  add({ low, high, cells, degrees }: EnergyTest, cell: number, sum: number): void {
    const kind = high - low === 2 ? TWO_BANDS : degrees === DEGREES ? ONE_BAND : ONE_BAND_LONG;
    const leafHz = (this.#band.highHz - this.#band.lowHz) / 8;
    this.#collected.push({
      kind,
      lowHz: this.#band.lowHz + low * leafHz,
      highHz: this.#band.lowHz + high * leafHz,
      firstCell: cell - cells,
      lastCell: cell - cells,
      strength: sum / (kind === ONE_BAND_LONG ? this.#longThreshold : this.#threshold),
    });
  }

  /**
   * Looks through the halves' samples in the cells [from, to) of the block: windows of 4 samples of both and of 8 samples
   * of each, overlapping by half.
   * @param gains what turns a half's energy into multiples of its floor.
   */
  scanHalves(
    gains: Float64Array,
    { from, to, blockCell }: { from: number; to: number; blockCell: number },
  ): void {
    const lowerGain = this.#leaves >= 4 ? gains[0]! : 0;
    const upperGain = this.#leaves >= 8 ? gains[1]! : 0;
    const [first, end] = [STEPS_PER_CELL * from, STEPS_PER_CELL * to];
    const limits = { lowerGain, upperGain, limit: this.#threshold };
    const count = this.#arithmetic.scanHalves(this.#halves, { from: first, to: end, ...limits });
    const hits = this.#halves.hits.values;
    for (let k = 0; k < count; k++) {
      const step = hits[k]! >> 2;
      const window = hits[k]! & 3;
      if (window >= HALF_WINDOWS.lower) this.#addHalf(window, blockCell, 4 * step - 4);
      else if (upperGain > 0)
        this.#addHalf(window, blockCell, window === HALF_WINDOWS.bothEarly ? 4 * step - 2 : 4 * step);
    }
  }

  /** @param firstSample of the window in the block's samples of a half. */
  #addHalf(window: number, blockCell: number, firstSample: number): void {
    const { lowHz, highHz } = this.#band;
    const middleHz = (lowHz + highHz) / 2;
    const firstCell = blockCell + firstSample / HALF_SAMPLES_PER_CELL;
    this.#collected.push({
      kind: window < HALF_WINDOWS.lower ? BOTH_HALVES : ONE_HALF,
      lowHz: window === HALF_WINDOWS.upper ? middleHz : lowHz,
      highHz: window === HALF_WINDOWS.lower ? middleHz : highHz,
      firstCell,
      lastCell: firstCell,
      strength: 1,
    });
  }

  /** No weak spots in these cells: a region is active there. */
  leaveOut(start: number, end: number): void {
    this.#leftOut.push([start, end]);
  }

  /** Takes what was collected up to a cell; what lies beyond is forgotten, since it will be looked at again. */
  settle(cell: number, openSince: number): void {
    this.#leftOut = this.#leftOut.filter(([, end]) => end > cell - 4 * PAST_CELLS);
    const lengths = this.#collected
      .filter(({ firstCell, kind }) => {
        const end = firstCell + lengthOf(kind);
        return (
          end <= cell &&
          end <= openSince &&
          !this.#leftOut.some(([start, until]) => firstCell < until && end > start)
        );
      })
      .sort((a, b) => a.kind - b.kind || a.firstCell - b.firstCell || a.lowHz - b.lowHz);
    this.#collected = [];
    this.#ready.push(...strongest(joined(lengths)));
  }

  take(): WeakSpot[] {
    const ready = this.#ready;
    this.#ready = [];
    return ready;
  }
}

function lengthOf(kind: number): number {
  return [0.5, 1, 2, 4, 8][kind] ?? 0;
}

/** Windows of one kind that begin half a window apart at most and whose bands touch are one spot. */
function joined(spots: readonly WeakSpot[]): WeakSpot[] {
  const result: WeakSpot[] = [];
  for (const spot of spots) {
    const near = result.find(
      (other) =>
        other.kind === spot.kind &&
        spot.firstCell - other.firstCell <= lengthOf(spot.kind) / 2 &&
        spot.lowHz <= other.highHz &&
        other.lowHz <= spot.highHz &&
        Math.max(spot.highHz, other.highHz) - Math.min(spot.lowHz, other.lowHz) <=
          (spot.kind === ONE_HALF ? 1 : 2) * (spot.highHz - spot.lowHz) + 1e-6,
    );
    if (!near) {
      result.push(spot);
      continue;
    }
    result[result.indexOf(near)] = {
      ...near,
      lowHz: Math.min(near.lowHz, spot.lowHz),
      highHz: Math.max(near.highHz, spot.highHz),
      lastCell: Math.max(near.lastCell, spot.firstCell),
      strength: Math.max(near.strength, spot.strength),
    };
  }
  return result;
}

function strongest(spots: WeakSpot[]): WeakSpot[] {
  if (spots.length <= MOST_PER_BLOCK) return spots;
  return spots.sort((a, b) => b.strength - a.strength).slice(0, MOST_PER_BLOCK);
}
