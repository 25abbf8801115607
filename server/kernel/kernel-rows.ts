import type { SampleWindow } from '../signal/frame-cursor.ts';
import {
  checkRows,
  FEATURE,
  type BinRange,
  type LongFrameRows,
  type LongFrameSettings,
  type RowRange,
  type ShortFrameRows,
  type ShortFrameSettings,
} from '../signal/frame-engine.ts';
import type { FrameGrid } from '../signal/frame-plan.ts';
import { BAND_COLUMN } from '../signal/frame-row.ts';
import { frameRuns, type FrameRun } from '../signal/frame-runs.ts';
import { planFeatures, planTransform } from './frame-tables.ts';
import type { Kernel, KernelArray } from './kernel.ts';

/** The kernel works on four frames at a time and writes all four. */
const SPARE_ROWS = 3;
/** Rows of the table are written in fours. */
const SPARE_FLOATS = 3;
const FLOAT_BYTES = Float32Array.BYTES_PER_ELEMENT;

const multipleOfFour = (count: number) => Math.ceil(count / 4) * 4;

interface RowSettings {
  grid: FrameGrid;
  frames: number;
  firstBin: number;
  endBin: number;
  capacity: number;
}

/** Rows of powers in the kernel's memory. */
abstract class KernelRows {
  readonly powerStride: number;
  readonly firstBin: number;
  readonly bins: number;
  protected readonly kernel: Kernel;
  protected readonly powers: KernelArray<Float32Array>;
  readonly #settings: RowSettings;
  readonly #codes: KernelArray<Uint8Array>;
  readonly #staging: KernelArray<Float32Array>;

  constructor(kernel: Kernel, settings: RowSettings) {
    const { grid, firstBin, endBin, capacity } = settings;
    this.kernel = kernel;
    this.#settings = settings;
    this.firstBin = firstBin;
    this.bins = endBin - firstBin;
    this.powerStride = multipleOfFour(this.bins);
    this.powers = kernel.array(Float32Array, (capacity + SPARE_ROWS) * this.powerStride);
    this.#codes = kernel.array(Uint8Array, capacity * this.bins);
    this.#staging = kernel.array(Float32Array, (capacity + 1) * grid.hop);
  }

  get power(): Float32Array {
    return this.powers.values;
  }

  analyse(window: SampleWindow, first: number, end: number): void {
    const { grid, frames, capacity } = this.#settings;
    if (end - first > capacity) throw new RangeError(`frames: ${end - first} are more than ${capacity}`);
    for (const run of frameRuns(grid, frames, { first, end })) {
      this.analyseRun(this.#addressOf(window, run), run.count, run.first - first);
    }
  }

  encode(rows: RowRange, range: BinRange, group: number): Uint8Array {
    checkRows(this, rows, range, this.#settings.capacity);
    const count = rows.endRow - rows.firstRow;
    const bins = range.end - range.first;
    const from = rows.firstRow * this.powerStride + range.first - this.firstBin;
    const power = this.powers.address + from * FLOAT_BYTES;
    this.kernel.call.codes(power, this.powerStride, count, bins, group, this.#codes.address);
    return this.#codes.values.subarray(0, Math.ceil(count / group) * bins);
  }

  protected abstract analyseRun(samples: number, count: number, row: number): void;

  #addressOf({ samples, startSample }: SampleWindow, run: FrameRun): number {
    const from = run.startSample - startSample;
    const to = from + (run.count + 1) * this.#settings.grid.hop;
    return this.kernel.place(samples, from, to, this.#staging);
  }
}

export class KernelLongFrames extends KernelRows implements LongFrameRows {
  readonly featureStride: number;
  readonly #features: KernelArray<Float32Array>;
  readonly #plan: number;
  readonly #bands: number;
  readonly #table: KernelArray<Float32Array>;

  constructor(kernel: Kernel, settings: LongFrameSettings) {
    const { grid, sampleRateHz, bands, capacity } = settings;
    super(kernel, { ...settings, firstBin: 0, endBin: grid.size / 2 });
    this.featureStride = multipleOfFour(FEATURE.thirdOctaves + bands.length);
    this.#features = kernel.array(Float32Array, (capacity + SPARE_ROWS) * this.featureStride);
    this.#bands = bands.length;
    this.#table = kernel.array(Float32Array, capacity * (BAND_COLUMN + bands.length) + SPARE_FLOATS);
    const { size } = grid;
    this.#plan = planFeatures(kernel, {
      size,
      sampleRateHz,
      bands,
      featureStride: this.featureStride,
    }).address;
  }

  get features(): Float32Array {
    return this.#features.values;
  }

  table(count: number, crossingsToHz: number): Float32Array {
    const { featureStride } = this;
    const { address } = this.#features;
    this.kernel.call.tableRows(
      address,
      featureStride,
      count,
      this.#bands,
      crossingsToHz,
      this.#table.address,
    );
    return this.#table.values.subarray(0, count * (BAND_COLUMN + this.#bands));
  }

  protected analyseRun(samples: number, count: number, row: number): void {
    const power = this.powers.address + row * this.powerStride * FLOAT_BYTES;
    const features = this.#features.address + row * this.featureStride * FLOAT_BYTES;
    this.kernel.call.frames(this.#plan, samples, count, power, features);
  }
}

export class KernelShortFrames extends KernelRows implements ShortFrameRows {
  readonly #meanSquares: KernelArray<Float32Array>;
  readonly #plan: number;

  constructor(kernel: Kernel, settings: ShortFrameSettings) {
    super(kernel, settings);
    this.#meanSquares = kernel.array(Float32Array, settings.capacity + SPARE_ROWS);
    this.#plan = planTransform(kernel, settings.grid.size).address;
  }

  get meanSquares(): Float32Array {
    return this.#meanSquares.values;
  }

  protected analyseRun(samples: number, count: number, row: number): void {
    const { firstBin, powerStride } = this;
    const power = this.powers.address + row * powerStride * FLOAT_BYTES;
    const meanSquares = this.#meanSquares.address + row * FLOAT_BYTES;
    const endBin = firstBin + this.bins;
    this.kernel.call.powerRows(this.#plan, samples, count, firstBin, endBin, power, powerStride, meanSquares);
  }
}
