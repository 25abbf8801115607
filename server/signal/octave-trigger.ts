import type { ActiveRegion } from './active-region.ts';
import { BANDS_PER_OCTAVE, type OctaveBand, VALUES_PER_CELL } from './band-energy.ts';
import { CellSums, PAST_CELLS } from './cell-sums.ts';
import { chiSquareThreshold } from './chi-square.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { type EnergyTest, LONGEST_TEST_CELLS, planEnergyTests } from './energy-tests.ts';
import { type OctaveArithmetic, WINDOW_WIDTHS } from './octave-arithmetic.ts';
import { OctaveFloor } from './octave-floor.ts';
import { type WeakSpot, WeakSpots } from './weak-spots.ts';

export interface OctaveTriggerOptions {
  readonly arithmetic: OctaveArithmetic;
  readonly band: OctaveBand;
  readonly sampleRateHz: number;
  readonly highestHz: number;
  readonly settings: DetectorSettings;
  /** Chance that noise gives one weak spot in one sum. */
  readonly weakChance: number;
}

/** Cells at the beginning of the stream into which the turned samples before it reach. */
const TURNED_CELLS = 4;

/** A sum above its threshold, and the cell behind its window. */
interface Fired {
  readonly cell: number;
  readonly test: EnergyTest;
  readonly sum: number;
}

interface OpenRegion {
  start: number;
  best: Omit<ActiveRegion, 'cut' | 'continues'>;
  continues: boolean;
}

/**
 * Finds active regions in the cells of one octave, and weak spots outside of them.
 *
 * Each sub-band's energy is divided by its own running floor; rectangles of one to eight neighbouring sub-bands and 8 to
 * 64 values in all are summed, and a sum above the chi-square threshold of its number of values fires. The threshold's
 * chance is the allowed rate over the number of sums per second, so the rate of chance is known beforehand. A floor
 * whose block means spread wider than those of steady noise is raised by as much. Where a sum of 8 or 16 values passes a far lower
 * threshold only, the place is a weak spot, to be looked at more closely.
 *
 * Source: for the summed squares against a threshold, H. Urkowitz, Energy detection of unknown deterministic signals,
 * Proc. IEEE 55 (1967) 523.
 */
export class OctaveTrigger {
  readonly testsPerSecond: number;
  readonly floor: OctaveFloor;
  readonly #band: OctaveBand;
  readonly #sampleRateHz: number;
  /** By length, as the windows of the sums. */
  readonly #tests: readonly (readonly EnergyTest[])[];
  /** By number of values. */
  readonly #thresholds: number[] = [];
  readonly #sums: CellSums;
  readonly #weak: WeakSpots;
  readonly #fired: Fired[] = [];
  readonly #halfGains = new Float64Array(2);
  readonly #gapCells: number;
  readonly #longestCells: number;
  #blockCell = 0;
  #open: OpenRegion | null = null;
  #quietFrom = 0;
  #regions: ActiveRegion[] = [];
  #cutCell = -Infinity;
  #gatheredCells = 0;

  constructor({ arithmetic, band, sampleRateHz, highestHz, settings, weakChance }: OctaveTriggerOptions) {
    this.#band = band;
    this.#sampleRateHz = sampleRateHz;
    const cellS = band.samplesPerCell / sampleRateHz;
    const usable = Math.floor((highestHz - band.lowHz) / this.#leafHz + 1e-9);
    const leaves = Math.max(1, Math.min(BANDS_PER_OCTAVE, usable));
    this.#tests = planEnergyTests(leaves, Math.max(2, Math.floor(settings.longestWindowS / cellS)));
    this.#sums = new CellSums(arithmetic, band);
    this.#weak = new WeakSpots({ arithmetic, band, leaves, chance: weakChance });
    this.testsPerSecond = this.#tests.flat().reduce((sum, test) => sum + 1 / test.hop, 0) / cellS;
    this.#gapCells = Math.max(1, Math.ceil(settings.quietGapS / cellS));
    this.#longestCells = Math.max(4, Math.ceil(settings.longestBurstS / cellS));
    const { floorMemoryS: memoryS, longestBurstS } = settings;
    this.floor = new OctaveFloor({ leaves, cellS, memoryS, longestBurstS });
  }

  setChance(chance: number): void {
    for (const { degrees } of this.#tests.flat())
      this.#thresholds[degrees] ??= chiSquareThreshold(degrees, chance);
    this.#tests.forEach((tests, length) => {
      for (const test of tests) {
        const at = length * WINDOW_WIDTHS.length + Math.log2(test.high - test.low);
        const least = Math.min(this.#thresholds[test.degrees]!, this.#weak.thresholdOf(test));
        this.#sums.limits.values[at] = least;
      }
    });
  }

  /** Noise power at a frequency of this octave, raised as the thresholds see it, in units of white noise of variance 1; 0 where unwatched. */
  levelAt(frequencyHz: number): number {
    const leaf = Math.floor((frequencyHz - this.#band.lowHz) / this.#leafHz);
    const gain = this.floor.gains[leaf] ?? 0;
    return gain > 0 && this.floor.isWatched(leaf) ? 1 / (gain * this.#band.gain) : 0;
  }

  /** First sample of the region now open; `null` between regions. */
  openSinceSample(): number | null {
    return this.#open ? this.#open.start * this.#band.samplesPerCell : null;
  }

  /** Samples up to which regions are decided, apart from an open one. */
  decidedSamples(): number {
    return Math.max(0, this.#blockCell - LONGEST_TEST_CELLS) * this.#band.samplesPerCell;
  }

  takeRegions(): ActiveRegion[] {
    const regions = this.#regions;
    this.#regions = [];
    return regions;
  }

  takeWeakSpots(): WeakSpot[] {
    return this.#weak.take();
  }

  /**
   * Takes the cells of the block that the tree processed last.
   * @param heldSamples samples of the block that were recorded; cells beyond are left out.
   */
  process(heldSamples: number): void {
    const cells = Math.floor(heldSamples / this.#band.samplesPerCell);
    for (let from = 0; from < cells;) {
      this.#setHalfGains();
      this.#sums.add(this.floor.gains, from, cells);
      this.#collect(from, cells);
      this.#weak.scanHalves(this.#halfGains, { from, to: cells, blockCell: this.#blockCell });
      const to = this.#walk(from, cells);
      this.#weak.settle(this.#blockCell + to, this.#open?.start ?? Infinity);
      from = to;
    }
    this.#sums.shift(cells);
    this.#blockCell += cells;
  }

  finish(): void {
    if (this.#open) this.#close(this.#blockCell, false);
  }

  get #leafHz(): number {
    return (this.#band.highHz - this.#band.lowHz) / BANDS_PER_OCTAVE;
  }

  /** Gains of the halves from those of their sub-bands; 0 where one of them is not watched. */
  #setHalfGains(): void {
    const gains = this.floor.gains;
    const perHalf = BANDS_PER_OCTAVE / 2;
    for (let half = 0; half < 2; half++) {
      let level = 0;
      for (let leaf = perHalf * half; leaf < perHalf * (half + 1); leaf++)
        level += this.floor.isWatched(leaf) ? 1 / gains[leaf]! / perHalf : Infinity;
      this.#halfGains[half] = this.#band.gain / this.#band.halfGain / level;
    }
  }

  /** What fires, by rising cell. */
  #collect(from: number, to: number): void {
    const blockCell = this.#blockCell;
    const phase = blockCell % PAST_CELLS;
    // Sums that reach back over a cut would mix two floors.
    const validFrom = Math.max(-LONGEST_TEST_CELLS, this.#cutCell - blockCell);
    this.#fired.length = 0;
    this.#sums.visitHits({ from, to, phase, validFrom }, (endCell, length) => {
      for (const test of this.#tests[length]!) {
        const sum = this.#sums.sum(test.low, test.high, endCell - test.cells, endCell);
        if (sum > this.#thresholds[test.degrees]!) this.#fired.push({ cell: blockCell + endCell, test, sum });
        else if (sum > this.#weak.thresholdOf(test)) this.#weak.add(test, blockCell + endCell, sum);
      }
    });
  }

  /** Goes through what fired; ends early, behind the cell returned, where a region was cut. */
  #walk(from: number, cells: number): number {
    const end = this.#blockCell + cells;
    this.#gatheredCells = this.#blockCell + from;
    for (const fired of this.#fired) {
      const cut = this.#advance(fired.cell);
      if (cut !== null) return cut - this.#blockCell;
      this.#fire(fired);
    }
    const cut = this.#advance(end);
    if (cut !== null) return cut - this.#blockCell;
    this.#gather(end);
    return cells;
  }

  /** Closes or cuts the open region where that is due up to a cell. @returns the cell of a cut. */
  #advance(cell: number): number | null {
    if (!this.#open) return null;
    const closesAt = this.#quietFrom + this.#gapCells + 1;
    const cutsAt = this.#open.start + this.#longestCells + 1;
    if (Math.min(closesAt, cutsAt) > cell) return null;
    const at = Math.max(this.#gatheredCells, Math.min(closesAt, cutsAt));
    this.#gather(at);
    if (closesAt <= cutsAt) {
      this.#close(this.#quietFrom, false);
      return null;
    }
    this.#close(at, true);
    this.#cutCell = at;
    this.floor.relearn();
    return at;
  }

  /** Gives the floor the cells up to `cell`; they are quiet where no region is open. */
  #gather(cell: number): void {
    const count = cell - this.#gatheredCells;
    if (count <= 0) return;
    const from = this.#gatheredCells - this.#blockCell;
    this.floor.gather(this.#sums, from, from + count, this.#open === null);
    this.#gatheredCells = cell;
  }

  #fire({ cell, test, sum }: Fired): void {
    const start = Math.max(0, cell - test.cells);
    if (!this.#open) {
      if (sum <= this.#thresholds[test.degrees]! * this.#backgroundBefore(start, test)) return;
      this.#gather(Math.max(this.#gatheredCells, start));
      const continues = cell <= this.#cutCell + this.#longestCells;
      this.#open = { start, best: this.#describe(cell, test, sum), continues };
      this.#quietFrom = cell + test.hop - 1;
      return;
    }
    this.#quietFrom = Math.max(this.#quietFrom, cell + test.hop - 1);
    this.#open.start = Math.min(this.#open.start, start);
    if (evidenceOf(test, sum) > this.#open.best.evidence) this.#open.best = this.#describe(cell, test, sum);
  }

  /**
   * What the energy just before a window says of a floor that lags: its mean over the floor less one standard deviation, at least 1. What
   * has grown slowly is no burst. In the first cells, which filters mix with their own mirror image, noise may have twice its power.
   */
  #backgroundBefore(start: number, { low, high }: EnergyTest): number {
    const end = start - this.#blockCell;
    const from = Math.max(-PAST_CELLS + 1, end - LONGEST_TEST_CELLS, this.#cutCell - this.#blockCell);
    const degrees = VALUES_PER_CELL * (high - low) * (end - from);
    const least = start < TURNED_CELLS ? 2 : 1;
    if (degrees <= 0) return least;
    const mean = this.#sums.sum(low, high, from, end) / degrees;
    return Math.max(least, mean * (1 - Math.sqrt(2 / degrees)));
  }

  #describe(cell: number, test: EnergyTest, sum: number): OpenRegion['best'] {
    const { lowHz, samplesPerCell } = this.#band;
    let noise = 0;
    for (let leaf = test.low; leaf < test.high; leaf++) noise += this.floor.levels[leaf]!;
    const startSample = Math.max(0, cell - test.cells) * samplesPerCell;
    const endSample = cell * samplesPerCell;
    return {
      startSample,
      endSample,
      bestStartSample: startSample,
      bestEndSample: endSample,
      lowHz: lowHz + test.low * this.#leafHz,
      highHz: lowHz + test.high * this.#leafHz,
      octaveLowHz: lowHz,
      evidence: evidenceOf(test, sum),
      degrees: test.degrees,
      powerRatio: sum / test.degrees,
      noisePerHz: noise / (test.high - test.low) / this.#band.gain / (this.#sampleRateHz / 2),
    };
  }

  #close(endCell: number, cut: boolean): void {
    if (!this.#open) return;
    const { start, best, continues } = this.#open;
    const step = this.#band.samplesPerCell;
    this.#regions.push({ ...best, startSample: start * step, endSample: endCell * step, cut, continues });
    this.#weak.leaveOut(start, endCell + this.#gapCells);
    this.#open = null;
  }
}

function evidenceOf({ degrees }: EnergyTest, sum: number): number {
  const ratio = sum / degrees;
  return (degrees / 2) * (ratio - 1 - Math.log(ratio));
}
