import { BANDS_PER_OCTAVE, VALUES_PER_CELL } from './band-energy.ts';
import type { CellSums } from './cell-sums.ts';
import { RunningFloor } from './noise-floor.ts';

const LEAST_CELLS = 4;
const BLOCKS = 32;
const BLOCKS_PER_READING = 8;
/** Values whose mean follows noise that grows. */
const LEAST_SHORT_VALUES = 128;
const LEAST_QUIET_SHARE = 0.25;
const SMALLEST_FLOOR = 1e-16;
const LEAST_BLOCKS_FOR_SPREAD = 16;
/** Parts of the longest burst of which the quiet ones tell what the background has become. */
const RECENT_PARTS = 32;
const RECENT_QUANTILE = 0.25;
/** A floor learned anew may be so many standard errors too low. */
const RELEARNED_ERRORS = 3;
/** What an unwatched sub-band weighs in every sum: a power of two, so that its energy can be had back as it was. */
const UNWATCHED = 2 ** -100;

const gathered = new Float64Array(BANDS_PER_OCTAVE);

export interface FloorOptions {
  /** Sub-bands from below that may be watched; the floors of the others are followed as well. */
  readonly leaves: number;
  readonly cellS: number;
  readonly memoryS: number;
  readonly longestBurstS: number;
}

/**
 * The running floors of one octave's sub-bands.
 *
 * A floor is the median of the last second, or the mean of the last few blocks where that is more: noise that grows is followed
 * at once. It is raised by its own statistical error and, where the blocks still spread wider about it than those of steady noise, by
 * the square of that excess: unsteady noise then gives no more chance candidates than steady noise does.
 */
export class OctaveFloor {
  /** Noise power of each sub-band. */
  readonly levels = new Float64Array(BANDS_PER_OCTAVE).fill(SMALLEST_FLOOR);
  /** What turns a cell's energy into multiples of the raised floor, next to nothing where a sub-band is not watched. */
  readonly gains = new Float64Array(BANDS_PER_OCTAVE);
  readonly #leaves: number;
  readonly #weights = new Float64Array(BANDS_PER_OCTAVE).fill(UNWATCHED);
  readonly #floors: readonly RunningFloor[];
  /** Block means over the floor at the time. */
  readonly #ratios: readonly RunningFloor[];
  readonly #raises = new Float64Array(BANDS_PER_OCTAVE).fill(1);
  readonly #shortBlocks: number;
  /** Means of the last parts, quiet or not, [part][sub-band]; the oldest is written over. */
  readonly #parts: Float64Array;
  readonly #cellsPerPart: number;
  readonly #cellsPerBlock: number;
  readonly #partSums = new Float64Array(BANDS_PER_OCTAVE);
  readonly #quietSums = new Float64Array(BANDS_PER_OCTAVE);
  #partCells = 0;
  #partsTaken = 0;
  #blockCells = 0;
  #quietCells = 0;
  #blocks = 0;
  #isChanged = false;
  #learning: { readonly perBlock: number; readonly floors: readonly RunningFloor[]; held: number } | null =
    null;

  constructor({ leaves, cellS, memoryS, longestBurstS }: FloorOptions) {
    this.#leaves = leaves;
    this.#weights.fill(1, 0, leaves);
    this.#cellsPerPart = powerOfTwo(longestBurstS / RECENT_PARTS / cellS);
    this.#cellsPerBlock = Math.max(LEAST_CELLS, powerOfTwo(memoryS / BLOCKS / cellS));
    const perBlock = VALUES_PER_CELL * this.#cellsPerBlock;
    this.#floors = Array.from({ length: BANDS_PER_OCTAVE }, () => new RunningFloor(BLOCKS, perBlock));
    this.#ratios = Array.from({ length: BANDS_PER_OCTAVE }, () => new RunningFloor(BLOCKS, perBlock));
    this.#shortBlocks = Math.min(BLOCKS, Math.max(2, Math.ceil(LEAST_SHORT_VALUES / perBlock)));
    const parts = Math.max(
      8,
      Math.min(RECENT_PARTS, Math.floor(longestBurstS / (this.#cellsPerPart * cellS))),
    );
    this.#parts = new Float64Array(parts * BANDS_PER_OCTAVE);
  }

  /**
   * Takes the energies [value][sub-band] of a block before anything is decided.
   * @param valuesInAll values of each sub-band in all blocks that will be learned from.
   */
  learn(energies: Float64Array, valuesInAll: number): void {
    // A short recording is cut into smaller blocks, so that the median has some to choose from.
    const perBlock = Math.max(1, Math.min(VALUES_PER_CELL * this.#cellsPerBlock, valuesInAll >> 4));
    const most = Math.max(1, Math.ceil(valuesInAll / perBlock));
    this.#learning ??= {
      perBlock,
      floors: this.#floors.map(() => new RunningFloor(most, perBlock)),
      held: 0,
    };
    const { floors } = this.#learning;
    let held = 0;
    for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++) {
      held = this.#learning.held;
      let sum = this.#quietSums[leaf]!;
      for (let at = leaf; at < energies.length; at += BANDS_PER_OCTAVE) {
        sum += energies[at]!;
        if (++held < perBlock) continue;
        floors[leaf]?.push(sum / perBlock);
        sum = 0;
        held = 0;
      }
      this.#quietSums[leaf] = sum;
    }
    this.#learning.held = held;
  }

  /** Sets the floors from what was learned. */
  endLearning(): void {
    const learned = this.#learning;
    this.#learning = null;
    this.#quietSums.fill(0);
    for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++) {
      const floor = learned?.floors[leaf];
      if (!floor) continue;
      this.levels[leaf] = Math.max(SMALLEST_FLOOR, floor.quantile(0.5));
      const upper = floor.blocks < LEAST_BLOCKS_FOR_SPREAD ? null : floor.upper() / this.levels[leaf]!;
      this.#raises[leaf] = raiseOf(learned.perBlock, floor.blocks, upper);
      this.#setGain(leaf, this.levels[leaf]!);
    }
  }

  /** Takes the cells [from, to) of running sums of gained energies; only quiet ones move the floor. */
  gather(sums: CellSums, from: number, to: number, quiet: boolean): void {
    const gains = this.gains;
    const partSums = this.#partSums;
    const quietSums = this.#quietSums;
    for (let cell = from; cell < to;) {
      const room = Math.min(this.#cellsPerPart - this.#partCells, this.#cellsPerBlock - this.#blockCells);
      const count = Math.min(to - cell, room);
      sums.columnSums(cell, cell + count, gathered);
      for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++) {
        const sum = gathered[leaf]! / gains[leaf]!;
        partSums[leaf] = partSums[leaf]! + sum;
        if (quiet) quietSums[leaf] = quietSums[leaf]! + sum;
      }
      cell += count;
      this.#partCells += count;
      this.#blockCells += count;
      if (quiet) this.#quietCells += count;
      if (this.#partCells === this.#cellsPerPart) this.#endPart();
      if (this.#blockCells === this.#cellsPerBlock) this.#endBlock();
    }
  }

  /** Whether floors have changed since the last time it was asked. */
  takeChange(): boolean {
    const changed = this.#isChanged;
    this.#isChanged = false;
    return changed;
  }

  /**
   * Takes what the last burst's quieter moments leave for the floor: what lasts longer than a burst is background. Between overlapping
   * bursts the background is what a quarter of the time lies under.
   */
  relearn(): void {
    const count = Math.min(this.#partsTaken, this.#parts.length / BANDS_PER_OCTAVE);
    const values = VALUES_PER_CELL * this.#cellsPerPart;
    for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++) {
      const recent = new RunningFloor(Math.max(1, count), values);
      for (let part = 0; part < count; part++) recent.push(this.#parts[part * BANDS_PER_OCTAVE + leaf]!);
      const level = Math.max(recent.quantile(RECENT_QUANTILE), SMALLEST_FLOOR);
      this.#floors[leaf]?.fill(level);
      this.levels[leaf] = level;
      this.#raises[leaf] = 1 + RELEARNED_ERRORS * relativeError(values * count);
      this.#setGain(leaf, level);
    }
    this.#quietSums.fill(0);
    this.#quietCells = 0;
    this.#isChanged = true;
  }

  isWatched(leaf: number): boolean {
    return this.#weights[leaf] === 1;
  }

  /** Leaves sub-bands out of every sum, or takes them in again. */
  watch(isWanted: (leaf: number) => boolean): void {
    for (let leaf = 0; leaf < this.#leaves; leaf++) {
      const weight = isWanted(leaf) ? 1 : UNWATCHED;
      this.gains[leaf] = (this.gains[leaf]! / this.#weights[leaf]!) * weight;
      this.#weights[leaf] = weight;
    }
  }

  #setGain(leaf: number, level: number): void {
    this.gains[leaf] = this.#weights[leaf]! / (level * this.#raises[leaf]!);
  }

  #endPart(): void {
    const at = (this.#partsTaken * BANDS_PER_OCTAVE) % this.#parts.length;
    for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++)
      this.#parts[at + leaf] = this.#partSums[leaf]! / (VALUES_PER_CELL * this.#partCells);
    this.#partsTaken += 1;
    this.#partSums.fill(0);
    this.#partCells = 0;
  }

  #endBlock(): void {
    this.#blocks += 1;
    if (this.#quietCells >= LEAST_QUIET_SHARE * this.#blockCells) this.#pushBlock();
    this.#quietSums.fill(0);
    this.#blockCells = 0;
    this.#quietCells = 0;
  }

  /** Between two readings of the median the level changes by the short mean alone. */
  #pushBlock(): void {
    const isRead = this.#blocks % BLOCKS_PER_READING === 0;
    const valuesPerBlock = VALUES_PER_CELL * this.#cellsPerBlock;
    for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++) {
      const floor = this.#floors[leaf]!;
      const ratios = this.#ratios[leaf]!;
      const mean = this.#quietSums[leaf]! / (VALUES_PER_CELL * this.#quietCells);
      ratios.push((mean * this.gains[leaf]! * this.#raises[leaf]!) / this.#weights[leaf]!);
      floor.push(mean);
      if (isRead && floor.blocks === BLOCKS) {
        this.levels[leaf] = Math.max(SMALLEST_FLOOR, floor.quantile(0.5));
        this.#raises[leaf] = raiseOf(
          valuesPerBlock,
          BLOCKS,
          ratios.blocks === BLOCKS ? ratios.upper() : null,
        );
      }
      const level = Math.max(this.levels[leaf]!, floor.recentMean(this.#shortBlocks));
      this.#setGain(leaf, level);
    }
    this.#isChanged = true;
  }
}

/** The nearest power of two, at least 1: what is counted from different beginnings then meets again. */
function powerOfTwo(wanted: number): number {
  return 2 ** Math.max(0, Math.round(Math.log2(wanted)));
}

function relativeError(values: number): number {
  return 1.25 * Math.sqrt(2 / Math.max(1, values));
}

/** @param upper 84 % point of block means over the floor; `null` where there are too few of them. */
function raiseOf(valuesPerBlock: number, blocks: number, upper: number | null): number {
  const error = relativeError(valuesPerBlock * blocks);
  const excess = upper === null ? 1 : upper / expectedUpper(valuesPerBlock);
  return (1 + error) * Math.max(1, excess / (1 + 2 * error)) ** 2;
}

/** The 84 % point of the mean of n squared normal values (Wilson and Hilferty). */
function expectedUpper(valuesPerBlock: number): number {
  const spread = 2 / (9 * valuesPerBlock);
  return (1 - spread + Math.sqrt(spread)) ** 3;
}
