/** Cells per doubling of power: 4, so that a cell is between 0.6 and 1 dB wide. */
const MANTISSA_BITS = 2;
const CELLS_PER_OCTAVE = 1 << MANTISSA_BITS;
const CELL_SHIFT = 23 - MANTISSA_BITS;
/** From 2^-64 (-193 dB) to 2^8. */
const LOWEST_EXPONENT = -64;
const OCTAVES = 72;
const FIRST_CELL = (LOWEST_EXPONENT + 127) << MANTISSA_BITS;
const CELLS = OCTAVES * CELLS_PER_OCTAVE;

/** Histograms of all points, to be added to those of other segments. */
export interface PowerQuantilesPart {
  counts: Uint32Array;
  frames: number;
}

/**
 * Quantiles over time of each point of a spectrum, in constant memory: a histogram per point whose cells are the upper
 * bits of a float32, which costs no logarithm. The error is under half a cell, 0.5 dB.
 */
export class PowerQuantiles {
  readonly #points: number;
  readonly #counts: Uint32Array;
  readonly #copy: Float32Array;
  readonly #bits: Uint32Array;
  #frames = 0;

  constructor(points: number) {
    this.#points = points;
    this.#counts = new Uint32Array(points * CELLS);
    this.#copy = new Float32Array(points);
    this.#bits = new Uint32Array(this.#copy.buffer);
  }

  /** @param power one value per point, at least 0, finite. */
  push(power: Float32Array): void {
    this.#copy.set(power);
    const bits = this.#bits;
    const counts = this.#counts;
    for (let p = 0, row = 0; p < bits.length; p++, row += CELLS) {
      const cell = (bits[p]! >>> CELL_SHIFT) - FIRST_CELL;
      counts[row + (cell < 0 ? 0 : cell >= CELLS ? CELLS - 1 : cell)]!++;
    }
    this.#frames++;
  }

  get part(): PowerQuantilesPart {
    return { counts: this.#counts, frames: this.#frames };
  }

  /** Takes in the frames that another one of the same points was given. */
  absorb({ counts, frames }: PowerQuantilesPart): void {
    for (let cell = 0; cell < counts.length; cell++) this.#counts[cell]! += counts[cell]!;
    this.#frames += frames;
  }

  /** @param share 0 to 1. @returns one value per point; zeros without any frame. */
  quantile(share: number): Float64Array {
    const found = new Float64Array(this.#points);
    for (let p = 0; p < this.#points; p++) found[p] = this.#quantileAt(p * CELLS, share * this.#frames);
    return found;
  }

  #quantileAt(row: number, rank: number): number {
    let seen = 0;
    for (let cell = 0; cell < CELLS; cell++) {
      const count = this.#counts[row + cell]!;
      if (count === 0) continue;
      if (seen + count >= rank) return valueInCell(cell, (rank - seen) / count);
      seen += count;
    }
    return 0;
  }
}

/** Within a cell, values are taken as evenly spread. The lowest cell holds zero as well. */
function valueInCell(cell: number, place: number): number {
  if (cell === 0) return 0;
  const octave = 2 ** (LOWEST_EXPONENT + Math.floor(cell / CELLS_PER_OCTAVE));
  return octave * (1 + ((cell % CELLS_PER_OCTAVE) + place) / CELLS_PER_OCTAVE);
}
