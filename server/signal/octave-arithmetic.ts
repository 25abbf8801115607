/** An array of an engine: its memory may move, so `values` is asked for anew each time. */
export interface Held<T> {
  readonly values: T;
}

/** Splits a signal into its lower half band and the two halves of its upper one. */
export interface UpperHalfSplit {
  readonly input: Held<Float32Array>;
  /** What lies below a quarter of the input's rate, at half of it. */
  readonly low: Held<Float32Array>;
  /** The lower and the upper half of the rest, by frequency, at a quarter of the rate. */
  readonly lowerHalf: Held<Float64Array>;
  readonly upperHalf: Held<Float64Array>;
  /** 12 numbers, zero at first. */
  readonly state: Held<Float64Array>;
}

/** Splits a band into four; the squares go into four columns of rows of eight. */
export interface QuarterSplit {
  readonly input: Held<Float64Array>;
  readonly energies: Held<Float64Array>;
  /** Columns in which the outputs low-low, low-high, high-low and high-high go. */
  readonly columns: readonly [number, number, number, number];
  /** 18 numbers, zero at first. */
  readonly state: Held<Float64Array>;
}

/** Running sums over time of rows of eight energies, two rows to a cell, in multiples of the floor. */
export interface CellAddition {
  readonly energies: Held<Float64Array>;
  /** Row `past + cell`: sums up to and with the cell. */
  readonly sums: Held<Float64Array>;
  readonly gains: Held<Float64Array>;
  readonly past: number;
}

/** Looks for windows whose sum exceeds a limit. */
export interface CellScan {
  readonly sums: Held<Float64Array>;
  readonly past: number;
  /** [length: 2, 4, 8, 16, 32 cells][width: 1, 2, 4, 8 columns]; Infinity where that window is not asked for. */
  readonly limits: Held<Float64Array>;
  /** Gets 8 x cell + length, the cell being the one behind the window, by rising cell. */
  readonly hits: Held<Int32Array>;
}

/** Looks for windows of the samples of both halves whose energy exceeds a limit. */
export interface HalfScan {
  readonly lowerHalf: Held<Float64Array>;
  readonly upperHalf: Held<Float64Array>;
  /** Gets 4 x step + which window, by rising step. */
  readonly hits: Held<Int32Array>;
}

/** Lengths of windows in cells: they end at multiples of half their length. */
export const WINDOW_CELLS = [2, 4, 8, 16, 32] as const;
/** Widths of windows in columns: they begin at multiples of half their width. */
export const WINDOW_WIDTHS = [1, 2, 4, 8] as const;

/** Windows that end in a step of four samples of each half: two samples of both before its middle and at its end, and eight of each. */
export const HALF_WINDOWS = { bothEarly: 0, bothLate: 1, lower: 2, upper: 3 } as const;

/**
 * The arithmetic that every sample goes through in the detector, on arrays of its own. Two engines give the same numbers to the bit.
 */
export interface OctaveArithmetic {
  floats(length: number): Held<Float32Array>;
  doubles(length: number): Held<Float64Array>;
  integers(length: number): Held<Int32Array>;
  /** @param quads number of input samples from `from` on, over 4; `low` gets twice as many from `lowFrom` on, the halves as many. */
  splitUpperHalf(split: UpperHalfSplit, from: number, quads: number, lowFrom: number): void;
  /** @param quads number of input samples over 4: rows written. */
  splitQuarters(split: QuarterSplit, quads: number): void;
  /** Adds up the cells [from, to). */
  addCells(addition: CellAddition, from: number, to: number): void;
  /**
   * Windows that end with the cells [from, to).
   * @param phase number of the block's first cell, modulo 32 or more.
   * @param validFrom no window begins before this cell.
   * @returns number of hits.
   */
  scanCells(scan: CellScan, range: { from: number; to: number; phase: number; validFrom: number }): number;
  /**
   * Windows that end in the steps [from, to) of four samples.
   * @returns number of hits.
   */
  scanHalves(
    scan: HalfScan,
    range: { from: number; to: number; lowerGain: number; upperGain: number; limit: number },
  ): number;
}
