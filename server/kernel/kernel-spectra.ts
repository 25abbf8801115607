import {
  QUANTILE_CELLS,
  type SpectrumTables,
  type SpectrumTablesSettings,
} from '../signal/spectrum-tables.ts';
import type { Kernel, KernelArray } from './kernel.ts';

const FLOAT_BYTES = Float32Array.BYTES_PER_ELEMENT;
/** Points that the kernel takes at once. */
const POINTS_AT_ONCE = 16;

/** The tables in the kernel's memory. */
export class KernelSpectrumTables implements SpectrumTables {
  readonly points: number;
  readonly #kernel: Kernel;
  readonly #group: number;
  readonly #maximum: KernelArray<Float32Array>;
  readonly #sums: KernelArray<Float64Array>;
  readonly #counts: KernelArray<Uint32Array>;
  readonly #marks: KernelArray<Int32Array>;
  readonly #prepared: KernelArray<Float32Array>;
  readonly #staging: KernelArray<Float32Array>;

  /** @throws RangeError for a number of points that is no multiple of 16. */
  constructor(kernel: Kernel, { points, group, classes, capacity }: SpectrumTablesSettings) {
    if (points % POINTS_AT_ONCE !== 0) {
      throw new RangeError(`points: ${points} is no multiple of ${POINTS_AT_ONCE}`);
    }
    this.points = points;
    this.#kernel = kernel;
    this.#group = group;
    this.#maximum = kernel.array(Float32Array, points);
    this.#sums = kernel.array(Float64Array, classes * points);
    this.#counts = kernel.array(Uint32Array, points * QUANTILE_CELLS);
    this.#marks = kernel.array(Int32Array, capacity);
    this.#prepared = kernel.array(Float32Array, capacity * points);
    this.#staging = kernel.array(Float32Array, points * group);
  }

  get maximum(): Float32Array {
    return this.#maximum.values;
  }

  get sums(): Float64Array {
    return this.#sums.values;
  }

  get counts(): Uint32Array {
    return this.#counts.values;
  }

  push(rows: Float32Array, stride: number, marks: Int32Array): void {
    const address = this.#group === 1 ? this.#kernel.addressOf(rows) : undefined;
    if (address === undefined) this.#prepare(rows, stride, marks.length);
    this.#marks.values.set(marks);
    this.#kernel.call.accumulate(
      address ?? this.#prepared.address,
      (address === undefined ? this.points : stride) * FLOAT_BYTES,
      this.#marks.address,
      marks.length,
      this.points,
      this.#maximum.address,
      this.#sums.address,
      this.#counts.address,
    );
  }

  /** Rows of another memory are copied in, bins averaged to points. */
  #prepare(rows: Float32Array, stride: number, count: number): void {
    const bins = this.points * this.#group;
    for (let row = 0; row < count; row++) {
      const address = this.#kernel.place(rows, row * stride, row * stride + bins, this.#staging);
      const out = this.#prepared.address + row * this.points * FLOAT_BYTES;
      this.#kernel.call.pool(address, this.#group, this.points, out);
    }
  }
}
