import { HALF_SAMPLES_PER_CELL, type OctaveBand } from './band-energy.ts';
import { PAST_CELLS } from './cell-sums.ts';
import { chiSquareThreshold } from './chi-square.ts';
import { BOTH_HALVES, ONE_BAND, ONE_BAND_LONG, ONE_HALF, TWO_BANDS } from './sine-windows.ts';
import type { EnergyTest } from './energy-tests.ts';

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
  readonly band: OctaveBand;
  readonly leaves: number;
  readonly chance: number;
}

const DEGREES = 8;
const LONG_DEGREES = 16;
const MOST_PER_BLOCK = 16;

/** Weak spots of one octave: collected per block, joined where windows overlap, none where a region is active. */
export class WeakSpots {
  readonly #band: OctaveBand;
  readonly #leaves: number;
  readonly #threshold: number;
  readonly #longThreshold: number;
  #collected: WeakSpot[] = [];
  #ready: WeakSpot[] = [];
  #leftOut: (readonly [start: number, end: number])[] = [];

  constructor({ band, leaves, chance }: WeakSpotsOptions) {
    this.#band = band;
    this.#leaves = leaves;
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
    const threshold = this.#threshold;
    const [lower, upper] = this.#band.halves;
    const lowerGain = this.#leaves >= 4 ? gains[0]! : 0;
    const upperGain = this.#leaves >= 8 ? gains[1]! : 0;
    // Sums over two and over four samples, of the steps before.
    let both = 0;
    let lowerFour = 0;
    let upperFour = 0;
    const steps = (HALF_SAMPLES_PER_CELL / 4) * to;
    const firstStep = (HALF_SAMPLES_PER_CELL / 4) * from;
    for (let step = Math.max(0, firstStep - 1); step < steps; step++) {
      const n = 4 * step;
      const a0 = lower[n]!;
      const a1 = lower[n + 1]!;
      const a2 = lower[n + 2]!;
      const a3 = lower[n + 3]!;
      const b0 = upper[n]!;
      const b1 = upper[n + 1]!;
      const b2 = upper[n + 2]!;
      const b3 = upper[n + 3]!;
      const a = (a0 * a0 + a1 * a1) * lowerGain;
      const aNext = (a2 * a2 + a3 * a3) * lowerGain;
      const b = (b0 * b0 + b1 * b1) * upperGain;
      const bNext = (b2 * b2 + b3 * b3) * upperGain;
      const ab = a + b;
      const abNext = aNext + bNext;
      const four = a + aNext;
      const upperNow = b + bNext;
      if (step >= firstStep) {
        if (upperGain > 0) {
          if (both + ab > threshold) this.#addHalf(BOTH_HALVES, blockCell, n - 2, both + ab);
          if (ab + abNext > threshold) this.#addHalf(BOTH_HALVES, blockCell, n, ab + abNext);
        }
        if (lowerFour + four > threshold) this.#addHalf(ONE_HALF, blockCell, n - 4, lowerFour + four);
        if (upperFour + upperNow > threshold)
          this.#addHalf(-ONE_HALF, blockCell, n - 4, upperFour + upperNow);
      }
      both = abNext;
      lowerFour = four;
      upperFour = upperNow;
    }
  }

  /** @param kind negative for the upper half. */
  #addHalf(kind: number, blockCell: number, firstSample: number, sum: number): void {
    const { lowHz, highHz } = this.#band;
    const middleHz = (lowHz + highHz) / 2;
    const firstCell = blockCell + firstSample / HALF_SAMPLES_PER_CELL;
    this.#collected.push({
      kind: Math.abs(kind),
      lowHz: kind < 0 ? middleHz : lowHz,
      highHz: kind === ONE_HALF ? middleHz : highHz,
      firstCell,
      lastCell: firstCell,
      strength: sum / this.#threshold,
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
