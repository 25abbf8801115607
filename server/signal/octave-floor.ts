import { BANDS_PER_OCTAVE } from './band-energy.ts';
import { RunningFloor } from './noise-floor.ts';

const BLOCK_S = 0.008;
const BLOCK_CELLS = 8;
const FEWEST_BLOCKS = 32;
const MOST_BLOCKS = 128;
const BLOCKS_PER_UPDATE = 16;
const LEAST_QUIET_SHARE = 0.25;
const SMALLEST_FLOOR = 1e-16;
const LEAST_BLOCKS_FOR_SPREAD = 16;

/**
 * The running floors of one octave's sub-bands.
 *
 * A floor is raised by its own statistical error and, where its block means spread wider than those of steady noise, by
 * the square of that excess: unsteady noise then gives no more chance candidates than steady noise does.
 */
export class OctaveFloor {
  /** Noise power of each sub-band. */
  readonly levels = new Float64Array(BANDS_PER_OCTAVE);
  /** What turns a cell's energy into multiples of the raised floor. */
  readonly gains = new Float64Array(BANDS_PER_OCTAVE);
  readonly #leaves: number;
  readonly #floors: readonly RunningFloor[];
  readonly #sums = new Float64Array(BANDS_PER_OCTAVE);
  readonly #cellsPerBlock: number;
  #blockCells = 0;
  #quietCells = 0;
  #blocks = 0;
  #isDue = false;

  constructor(leaves: number, cellS: number, memoryS: number) {
    this.#leaves = leaves;
    this.#cellsPerBlock = Math.max(BLOCK_CELLS, Math.round(BLOCK_S / cellS));
    const wanted = Math.ceil(memoryS / (this.#cellsPerBlock * cellS));
    const blocks = Math.min(MOST_BLOCKS, Math.max(FEWEST_BLOCKS, wanted));
    this.#floors = Array.from({ length: leaves }, () => new RunningFloor(blocks, this.#cellsPerBlock));
  }

  /** Sets the floors from the first cells of a stream, before anything is decided. */
  learn(blocks: readonly Float64Array[]): void {
    const cells = blocks.reduce((sum, energies) => sum + energies.length / BANDS_PER_OCTAVE, 0);
    // A short recording is cut into fewer cells per block, so that the median has blocks to choose from.
    const perBlock = Math.max(1, Math.min(this.#cellsPerBlock, cells >> 4));
    const floors = this.#floors.map(
      () => new RunningFloor(Math.max(1, Math.ceil(cells / perBlock)), perBlock),
    );
    const sums = new Float64Array(this.#leaves);
    let held = 0;
    for (const energies of blocks) {
      for (let at = 0; at < energies.length; at += BANDS_PER_OCTAVE) {
        for (let leaf = 0; leaf < this.#leaves; leaf++)
          sums[leaf] = (sums[leaf] ?? 0) + (energies[at + leaf] ?? 0);
        if (++held < perBlock) continue;
        floors.forEach((floor, leaf) => floor.push((sums[leaf] ?? 0) / perBlock));
        sums.fill(0);
        held = 0;
      }
    }
    floors.forEach((floor, leaf) => this.#setLevel(leaf, floor, perBlock));
  }

  /** Takes the cell at `energies[at]`; only quiet cells move the floor. */
  gather(energies: Float64Array, at: number, quiet: boolean): void {
    if (quiet) {
      const sums = this.#sums;
      for (let leaf = 0; leaf < BANDS_PER_OCTAVE; leaf++)
        sums[leaf] = (sums[leaf] ?? 0) + (energies[at + leaf] ?? 0);
      this.#quietCells += 1;
    }
    this.#blockCells += 1;
    if (this.#blockCells === this.#cellsPerBlock) this.#endBlock();
  }

  /**
   * Takes cells of which all are quiet, from running sums of gained energies over time and sub-bands.
   * @param sums [row][sub-bands below]: row `firstRow - 1` stands before the first cell.
   */
  gatherQuiet(sums: Float64Array, firstRow: number, cells: number): void {
    const width = BANDS_PER_OCTAVE + 1;
    for (let done = 0; done < cells;) {
      const count = Math.min(cells - done, this.#cellsPerBlock - this.#blockCells);
      const before = (firstRow - 1 + done) * width;
      const after = before + count * width;
      for (let leaf = 0; leaf < this.#leaves; leaf++) {
        const upTo = (sums[after + leaf + 1] ?? 0) - (sums[before + leaf + 1] ?? 0);
        const below = (sums[after + leaf] ?? 0) - (sums[before + leaf] ?? 0);
        this.#sums[leaf] = (this.#sums[leaf] ?? 0) + (upTo - below) / (this.gains[leaf] ?? 1);
      }
      done += count;
      this.#blockCells += count;
      this.#quietCells += count;
      if (this.#blockCells === this.#cellsPerBlock) this.#endBlock();
    }
  }

  #endBlock(): void {
    if (this.#quietCells >= LEAST_QUIET_SHARE * this.#blockCells) this.#pushBlock();
    this.#sums.fill(0);
    this.#blockCells = 0;
    this.#quietCells = 0;
  }

  #pushBlock(): void {
    this.#floors.forEach((floor, leaf) => floor.push((this.#sums[leaf] ?? 0) / this.#quietCells));
    this.#blocks += 1;
    this.#isDue ||= this.#blocks % BLOCKS_PER_UPDATE === 0 && this.#blocks >= FEWEST_BLOCKS;
  }

  /** Reads the floors anew where enough blocks have come since the last time; `gains` and `levels` change only here. */
  renew(): void {
    if (!this.#isDue) return;
    this.#isDue = false;
    this.#floors.forEach((floor, leaf) => this.#setLevel(leaf, floor, this.#cellsPerBlock));
  }

  #setLevel(leaf: number, floor: RunningFloor, valuesPerBlock: number): void {
    const reading = floor.read();
    const level = Math.max(SMALLEST_FLOOR, reading.level);
    const relativeError = 1.25 * Math.sqrt(2 / (valuesPerBlock * Math.max(1, floor.blocks)));
    const excess = reading.upperSpread / expectedUpperSpread(valuesPerBlock);
    const unsteady =
      floor.blocks >= LEAST_BLOCKS_FOR_SPREAD ? Math.max(1, excess / (1 + 2 * relativeError)) : 1;
    this.levels[leaf] = level;
    this.gains[leaf] = 1 / (level * (1 + relativeError) * unsteady * unsteady);
  }
}

/** The 84 % point over the median of the mean of n squared normal values (Wilson and Hilferty). */
function expectedUpperSpread(valuesPerBlock: number): number {
  const spread = 2 / (9 * valuesPerBlock);
  return ((1 - spread + Math.sqrt(spread)) / (1 - spread)) ** 3;
}
