import { BANDS_PER_OCTAVE, type OctaveBand } from './band-energy.ts';
import { chiSquareThreshold } from './chi-square.ts';
import type { DetectorSettings } from './detector-settings.ts';
import { type EnergyTest, planEnergyTests } from './energy-tests.ts';
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
  /** It goes on from one that was cut: only what rises inside it is an onset. */
  readonly continues: boolean;
}

export interface OctaveTriggerOptions {
  readonly band: OctaveBand;
  readonly sampleRateHz: number;
  readonly highestHz: number;
  readonly settings: DetectorSettings;
}

interface Fired {
  readonly cell: number;
  readonly index: number;
  readonly sum: number;
}

/** Rows of running sums kept from the block before: the longest test. */
const HISTORY = 64;
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
  readonly #thresholds: Float64Array;
  readonly #sums: Float64Array;
  readonly #floor: OctaveFloor;
  readonly #leaves: number;
  readonly #gapCells: number;
  readonly #longestCells: number;
  #learning: Float64Array[] | null = [];
  #cell = 0;
  #open: { start: number; best: ActiveRegion; continues: boolean } | null = null;
  #quietFrom = 0;
  #regions: ActiveRegion[] = [];
  #relearnUntilCell = 0;
  #cutCell = -Infinity;

  constructor(options: OctaveTriggerOptions) {
    const { band, settings, sampleRateHz, highestHz } = options;
    this.#band = band;
    this.#options = options;
    const cellS = band.samplesPerCell / sampleRateHz;
    const leafHz = (band.highHz - band.lowHz) / BANDS_PER_OCTAVE;
    const usable = Math.floor((highestHz - band.lowHz) / leafHz + 1e-9);
    this.#leaves = Math.max(1, Math.min(BANDS_PER_OCTAVE, usable));
    this.#tests = planEnergyTests(this.#leaves, Math.max(2, Math.floor(settings.longestWindowS / cellS)));
    this.#sums = new Float64Array((HISTORY + band.cellsPerBlock) * ROW);
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
    const cells = energies.length / BANDS_PER_OCTAVE;
    this.#addUp(energies, cells);
    const fired = this.#collectFired(cells);
    if (fired.length === 0 && !this.#open) {
      this.#cell += cells;
      this.#floor.gatherQuiet(this.#sums, HISTORY, cells);
    } else {
      this.#replay(energies, fired);
    }
    this.#floor.renew();
    this.#sums.copyWithin(0, cells * ROW, (cells + HISTORY) * ROW);
  }

  /** Walks the cells of a block in which something fires, or a region is open, one by one. */
  #replay(energies: Float64Array, fired: readonly Fired[]): void {
    let next = 0;
    for (let at = 0; at < energies.length; at += BANDS_PER_OCTAVE) {
      this.#cell += 1;
      for (let hit = fired[next]; hit?.cell === this.#cell; hit = fired[++next]) this.#fire(hit);
      if (this.#open) this.#follow(this.#cell);
      this.#floor.gather(energies, at, this.#open === null || this.#cell < this.#relearnUntilCell);
    }
  }

  #collectFired(cells: number): Fired[] {
    const fired: Fired[] = [];
    for (let index = 0; index < this.#tests.length; index++) this.#tryTest(index, cells, fired);
    return fired.sort((a, b) => a.cell - b.cell || a.index - b.index);
  }

  /** Running sums over time and sub-bands, [cell][sub-bands below]: any rectangle's sum is four of them. */
  #addUp(energies: Float64Array, cells: number): void {
    const sums = this.#sums;
    const gains = this.#floor.gains;
    const leaves = this.#leaves;
    let row = HISTORY * ROW;
    for (let cell = 0, at = 0; cell < cells; cell++, at += BANDS_PER_OCTAVE, row += ROW) {
      let total = 0;
      for (let leaf = 0; leaf < leaves; leaf++) {
        total += (energies[at + leaf] ?? 0) * (gains[leaf] ?? 0);
        sums[row + leaf + 1] = (sums[row - ROW + leaf + 1] ?? 0) + total;
      }
    }
  }

  /** Where one test's sums, taken every hop, exceed its threshold. Cells are counted from 1, by their ends. */
  #tryTest(index: number, cells: number, fired: Fired[]): void {
    const test = this.#tests[index];
    if (!test) return;
    const sums = this.#sums;
    const threshold = this.#thresholds[index] ?? Infinity;
    const back = test.cells * ROW;
    const { hop, low, high } = test;
    const first = hop - (this.#cell % hop);
    for (let cell = first; cell <= cells; cell += hop) {
      const now = (HISTORY + cell - 1) * ROW;
      const then = now - back;
      const sum =
        (sums[now + high] ?? 0) - (sums[now + low] ?? 0) - (sums[then + high] ?? 0) + (sums[then + low] ?? 0);
      if (sum > threshold) fired.push({ cell: this.#cell + cell, index, sum });
    }
  }

  #follow(cell: number): void {
    if (!this.#open) return;
    if (cell > this.#quietFrom + this.#gapCells) this.#close(this.#quietFrom, false);
    else if (cell - this.#open.start > this.#longestCells) this.#cutOpen();
  }

  #fire({ cell, index, sum }: Fired): void {
    const test = this.#tests[index];
    if (!test) return;
    this.#quietFrom = Math.max(this.#quietFrom, cell + test.hop - 1);
    const degrees = (test.high - test.low) * test.cells;
    const ratio = sum / degrees;
    const evidence = (degrees / 2) * (ratio - 1 - Math.log(ratio));
    if (!this.#open) {
      const best = this.#describe(test, ratio, evidence);
      this.#open = { start: Math.max(0, cell - test.cells), best, continues: best.continues };
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
      continues: this.#cell <= this.#cutCell + HISTORY,
    };
  }

  #cutOpen(): void {
    const cell = this.#cell;
    this.#close(cell, true);
    this.#cutCell = cell;
    this.#relearnUntilCell = cell + this.#longestCells;
  }

  #close(endCell: number, cut: boolean): void {
    if (!this.#open) return;
    const { start, best, continues } = this.#open;
    const step = this.#band.samplesPerCell;
    this.#regions.push({
      ...best,
      startSample: start * step,
      endSample: Math.min(endCell, this.#cell) * step,
      cut,
      continues,
    });
    this.#open = null;
  }
}
