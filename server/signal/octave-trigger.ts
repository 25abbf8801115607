import { BANDS_PER_OCTAVE, type OctaveBand } from './band-energy.ts';
import { chiSquareThreshold } from './chi-square.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { countDueTests, type EnergyTest, planEnergyTests } from './energy-tests.ts';
import { OctaveFloor } from './octave-floor.ts';

/** A stretch of one octave in which energy stands over the floor by more than chance explains. */
export interface ActiveRegion {
  readonly startSample: number;
  readonly endSample: number;
  /** The window that stands out most. */
  readonly bestStartSample: number;
  readonly bestEndSample: number;
  readonly lowHz: number;
  readonly highHz: number;
  /** Log-likelihood by which the best window departs from noise. */
  readonly evidence: number;
  /** Mean power of the best window over the floor there. */
  readonly powerRatio: number;
  /** Noise power per hertz about the best window, full scale squared. */
  readonly noisePerHz: number;
  /** The floor learned while it lasted: a change of the background rather than a burst. */
  readonly cut: boolean;
}

export interface OctaveTriggerOptions {
  readonly band: OctaveBand;
  readonly sampleRateHz: number;
  readonly highestHz: number;
  readonly settings: DetectorSettings;
}

/** Rows of running sums held: more than the longest window. */
const RING = 128;
const RING_MASK = RING - 1;
const ROW = BANDS_PER_OCTAVE + 1;

/**
 * Finds active regions in the cells of one octave.
 *
 * Each sub-band's energy is divided by its own running floor; rectangles of one to eight neighbouring sub-bands and 8 to
 * 64 cells in all are summed, and a sum above the chi-square threshold of its number of cells fires. The threshold's
 * chance is the allowed rate over the number of sums per second, so the rate of chance is known beforehand. A floor
 * whose block means spread wider than those of steady noise is raised by as much.
 *
 * Source: for the summed squares against a threshold, H. Urkowitz, Energy detection of unknown deterministic signals,
 * Proc. IEEE 55 (1967) 523.
 */
export class OctaveTrigger {
  readonly testsPerSecond: number;
  readonly #band: OctaveBand;
  readonly #options: OctaveTriggerOptions;
  readonly #tests: readonly EnergyTest[];
  /** Three numbers per test: first sub-band, end, cells. */
  readonly #plan: Int32Array;
  readonly #testCountByZeros: Int32Array;
  readonly #thresholds: Float64Array;
  readonly #sums = new Float64Array(RING * ROW);
  readonly #floor: OctaveFloor;
  readonly #leaves: number;
  readonly #gapCells: number;
  readonly #longestCells: number;
  #learning: Float64Array[] | null = [];
  #cell = 0;
  #open: { start: number; best: ActiveRegion } | null = null;
  #quietFrom = 0;
  #regions: ActiveRegion[] = [];
  #relearnUntilCell = 0;

  constructor(options: OctaveTriggerOptions) {
    const { band, settings, sampleRateHz, highestHz } = options;
    this.#band = band;
    this.#options = options;
    const cellS = band.samplesPerCell / sampleRateHz;
    const leafHz = (band.highHz - band.lowHz) / BANDS_PER_OCTAVE;
    const usable = Math.floor((highestHz - band.lowHz) / leafHz + 1e-9);
    this.#leaves = Math.max(1, Math.min(BANDS_PER_OCTAVE, usable));
    this.#tests = planEnergyTests(this.#leaves, Math.max(2, Math.floor(settings.longestWindowS / cellS)));
    this.#plan = Int32Array.from(this.#tests.flatMap((test) => [test.low, test.high, test.cells]));
    this.#testCountByZeros = countDueTests(this.#tests);
    this.#thresholds = new Float64Array(this.#tests.length);
    this.testsPerSecond = this.#tests.reduce((sum, test) => sum + 1 / test.hop, 0) / cellS;
    this.#gapCells = Math.max(1, Math.ceil(settings.quietGapS / cellS));
    this.#longestCells = Math.max(8, Math.ceil(settings.longestBurstS / cellS));
    this.#floor = new OctaveFloor(this.#leaves, cellS, settings.floorMemoryS);
  }

  setChance(chance: number): void {
    this.#tests.forEach((test, index) => {
      this.#thresholds[index] = chiSquareThreshold((test.high - test.low) * test.cells, chance);
    });
  }

  /** First sample of the region now open; `null` between regions. */
  openSinceSample(): number | null {
    return this.#open ? this.#open.start * this.#band.samplesPerCell : null;
  }

  /** Samples up to which regions are decided, apart from an open one. */
  decidedSamples(): number {
    const longest = this.#tests.reduce((most, test) => Math.max(most, test.cells), 0);
    return Math.max(0, this.#cell - longest) * this.#band.samplesPerCell;
  }

  takeRegions(): ActiveRegion[] {
    const regions = this.#regions;
    this.#regions = [];
    return regions;
  }

  /**
   * Takes the cells of the block that the tree processed last.
   * @param learned whether enough has been seen to decide.
   * @param heldSamples samples of the block that were recorded; cells beyond are left out.
   */
  process(learned: boolean, heldSamples: number): void {
    const cells = Math.floor(heldSamples / this.#band.samplesPerCell);
    const energies = this.#band.energies.subarray(0, cells * BANDS_PER_OCTAVE);
    if (!this.#learning) {
      this.#run(energies);
      return;
    }
    this.#learning.push(energies.slice());
    if (learned) this.#learn();
  }

  finish(): void {
    if (this.#learning) this.#learn();
    if (this.#open) this.#close(this.#cell, false);
  }

  #learn(): void {
    const blocks = this.#learning ?? [];
    this.#learning = null;
    this.#floor.learn(blocks);
    for (const energies of blocks) this.#run(energies);
  }

  #run(energies: Float64Array): void {
    const sums = this.#sums;
    const gains = this.#floor.gains;
    const leaves = this.#leaves;
    for (let at = 0; at < energies.length; at += BANDS_PER_OCTAVE) {
      const row = (this.#cell & RING_MASK) * ROW;
      const previous = ((this.#cell - 1) & RING_MASK) * ROW;
      let total = 0;
      for (let leaf = 0; leaf < leaves; leaf++) {
        total += (energies[at + leaf] ?? 0) * (gains[leaf] ?? 0);
        sums[row + leaf + 1] = (sums[previous + leaf + 1] ?? 0) + total;
      }
      this.#cell += 1;
      this.#test(row);
      if (this.#open) this.#follow(this.#cell);
      this.#floor.gather(energies, at, this.#open === null || this.#cell < this.#relearnUntilCell);
    }
  }

  /** Sums that end with the cell just added; hops are powers of two, so the trailing zeros say which are due. */
  #test(row: number): void {
    const cell = this.#cell;
    const due = this.#testCountByZeros[Math.min(7, 31 - Math.clz32(cell & -cell))] ?? 0;
    const sums = this.#sums;
    const plan = this.#plan;
    const thresholds = this.#thresholds;
    for (let index = 0, at = 0; index < due; index++, at += 3) {
      const low = plan[at] ?? 0;
      const high = plan[at + 1] ?? 0;
      const then = ((cell - 1 - (plan[at + 2] ?? 0)) & RING_MASK) * ROW;
      const sum =
        (sums[row + high] ?? 0) - (sums[row + low] ?? 0) - (sums[then + high] ?? 0) + (sums[then + low] ?? 0);
      if (sum > (thresholds[index] ?? Infinity)) this.#fire(index, sum);
    }
  }

  #follow(cell: number): void {
    if (!this.#open) return;
    if (cell > this.#quietFrom + this.#gapCells) this.#close(this.#quietFrom, false);
    else if (cell - this.#open.start > this.#longestCells) this.#cutOpen();
  }

  #fire(index: number, sum: number): void {
    const cell = this.#cell;
    const test = this.#tests[index];
    if (!test) return;
    this.#quietFrom = Math.max(this.#quietFrom, cell + test.hop - 1);
    const degrees = (test.high - test.low) * test.cells;
    const ratio = sum / degrees;
    const evidence = (degrees / 2) * (ratio - 1 - Math.log(ratio));
    if (!this.#open) {
      this.#open = { start: Math.max(0, cell - test.cells), best: this.#describe(test, ratio, evidence) };
      return;
    }
    this.#open.start = Math.min(this.#open.start, Math.max(0, cell - test.cells));
    if (evidence > this.#open.best.evidence) this.#open.best = this.#describe(test, ratio, evidence);
  }

  #describe(test: EnergyTest, powerRatio: number, evidence: number): ActiveRegion {
    const { lowHz, highHz, samplesPerCell } = this.#band;
    const leafHz = (highHz - lowHz) / BANDS_PER_OCTAVE;
    let noise = 0;
    for (let leaf = test.low; leaf < test.high; leaf++) noise += this.#floor.levels[leaf] ?? 0;
    const startSample = Math.max(0, this.#cell - test.cells) * samplesPerCell;
    const endSample = this.#cell * samplesPerCell;
    return {
      startSample,
      endSample,
      bestStartSample: startSample,
      bestEndSample: endSample,
      lowHz: lowHz + test.low * leafHz,
      highHz: lowHz + test.high * leafHz,
      evidence,
      powerRatio,
      noisePerHz: noise / (test.high - test.low) / (this.#options.sampleRateHz / 2),
      cut: false,
    };
  }

  #cutOpen(): void {
    const cell = this.#cell;
    this.#close(cell, true);
    this.#relearnUntilCell = cell + this.#longestCells;
  }

  #close(endCell: number, cut: boolean): void {
    if (!this.#open) return;
    const { start, best } = this.#open;
    const step = this.#band.samplesPerCell;
    this.#regions.push({
      ...best,
      startSample: start * step,
      endSample: Math.min(endCell, this.#cell) * step,
      cut,
    });
    this.#open = null;
  }
}
