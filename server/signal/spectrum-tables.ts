/** Cells per doubling of power: 4, so that a cell is between 0.6 and 1 dB wide. */
const MANTISSA_BITS = 2;
export const CELLS_PER_OCTAVE = 1 << MANTISSA_BITS;
const CELL_SHIFT = 23 - MANTISSA_BITS;
/** From 2^-64 (-193 dB) to 2^8. */
export const LOWEST_EXPONENT = -64;
const OCTAVES = 72;
const FIRST_CELL = (LOWEST_EXPONENT + 127) << MANTISSA_BITS;
export const QUANTILE_CELLS = OCTAVES * CELLS_PER_OCTAVE;

export interface SpectrumTablesSettings {
  points: number;
  /** Neighbouring bins that are averaged to one point, a power of two. */
  group: number;
  /** Classes of frames whose spectra are summed apart. */
  classes: number;
  /** Most rows of one push. */
  capacity: number;
}

/** What spectra are gathered in, point by point. The arrays may be replaced when the engine sets something up. */
export interface SpectrumTables {
  readonly points: number;
  readonly maximum: Float32Array;
  /** Of class c from `c * points`. */
  readonly sums: Float64Array;
  /** Histogram of point p from `p * QUANTILE_CELLS`: its cells are the upper bits of a float32, which costs no logarithm. */
  readonly counts: Uint32Array;
  /**
   * @param rows of spectra, `stride` floats from one to the next: powers, finite and at least 0; bin 0 is left out where bins are
   * averaged. @param marks what to do with each row, see `spectrumMark`; there are as many rows as marks.
   */
  push(rows: Float32Array, stride: number, marks: Int32Array): void;
}

/** A row that is left out. */
export const NO_SPECTRUM = -1;
const COUNTED_MARK = 1 << 8;

/** @param classIndex under 256. @param isCounted whether it goes into the histograms. */
export function spectrumMark(classIndex: number, isCounted: boolean): number {
  return isCounted ? classIndex | COUNTED_MARK : classIndex;
}

/** Raises the cell of each power in its histogram. @param bits of float32 powers, finite and at least 0. */
function countPowers(bits: Uint32Array, counts: Uint32Array): void {
  for (let p = 0, row = 0; p < bits.length; p++, row += QUANTILE_CELLS) {
    const cell = (bits[p]! >>> CELL_SHIFT) - FIRST_CELL;
    counts[row + (cell < 0 ? 0 : cell >= QUANTILE_CELLS ? QUANTILE_CELLS - 1 : cell)]!++;
  }
}

export type OpenSpectrumTables = (settings: SpectrumTablesSettings) => SpectrumTables;

export const openPlainTables: OpenSpectrumTables = (settings) => new PlainSpectrumTables(settings);

/** The tables in plain memory. */
class PlainSpectrumTables implements SpectrumTables {
  readonly points: number;
  readonly maximum: Float32Array;
  readonly sums: Float64Array;
  readonly counts: Uint32Array;
  readonly #group: number;
  readonly #pooled: Float32Array;
  readonly #bits: Uint32Array;

  constructor({ points, group, classes }: SpectrumTablesSettings) {
    this.points = points;
    this.#group = group;
    this.maximum = new Float32Array(points);
    this.sums = new Float64Array(classes * points);
    this.counts = new Uint32Array(points * QUANTILE_CELLS);
    this.#pooled = new Float32Array(points);
    this.#bits = new Uint32Array(this.#pooled.buffer);
  }

  push(rows: Float32Array, stride: number, marks: Int32Array): void {
    const bins = this.points * this.#group;
    for (const [row, mark] of marks.entries()) {
      if (mark !== NO_SPECTRUM) this.#pushOne(rows.subarray(row * stride, row * stride + bins), mark);
    }
  }

  #pushOne(power: Float32Array, mark: number): void {
    const pooled = this.#pooled;
    if (this.#group === 1) pooled.set(power);
    else this.#pool(power);
    const { maximum, sums } = this;
    for (let p = 0, s = (mark & ~COUNTED_MARK) * this.points; p < pooled.length; p++, s++) {
      if (pooled[p]! > maximum[p]!) maximum[p] = pooled[p]!;
      sums[s]! += pooled[p]!;
    }
    if ((mark & COUNTED_MARK) !== 0) countPowers(this.#bits, this.counts);
  }

  #pool(power: Float32Array): void {
    const group = this.#group;
    for (let p = 0; p < this.points; p++) {
      const first = Math.max(1, p * group);
      const end = (p + 1) * group;
      let sum = 0;
      for (let k = first; k < end; k++) sum += power[k]!;
      this.#pooled[p] = sum / (end - first);
    }
  }
}
