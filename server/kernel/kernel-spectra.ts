import {
  QUANTILE_CELLS,
  type SpectrumTables,
  type SpectrumTablesSettings,
} from '../signal/spectrum-tables.ts';
import type { Kernel, KernelArray } from './kernel.ts';

/** The tables in the kernel's memory. */
export class KernelSpectrumTables implements SpectrumTables {
  readonly points: number;
  readonly #kernel: Kernel;
  readonly #group: number;
  readonly #maximum: KernelArray<Float32Array>;
  readonly #sums: KernelArray<Float64Array>;
  readonly #counts: KernelArray<Uint32Array>;
  readonly #pooled: KernelArray<Float32Array>;
  readonly #staging: KernelArray<Float32Array>;

  /** @throws RangeError for a number of points that is no multiple of four. */
  constructor(kernel: Kernel, { points, group, classes }: SpectrumTablesSettings) {
    if (points % 4 !== 0) throw new RangeError(`points: ${points} is no multiple of four`);
    this.points = points;
    this.#kernel = kernel;
    this.#group = group;
    this.#maximum = kernel.array(Float32Array, points);
    this.#sums = kernel.array(Float64Array, classes * points);
    this.#counts = kernel.array(Uint32Array, points * QUANTILE_CELLS);
    this.#pooled = kernel.array(Float32Array, points);
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

  push(power: Float32Array, classIndex: number, isCounted: boolean): void {
    const { points } = this;
    const sums = this.#sums.address + classIndex * points * Float64Array.BYTES_PER_ELEMENT;
    const counts = isCounted ? this.#counts.address : 0;
    this.#kernel.call.accumulate(this.#place(power), points, this.#maximum.address, sums, counts);
  }

  #place(power: Float32Array): number {
    const bins = this.points * this.#group;
    const address = this.#kernel.place(power, 0, bins, this.#staging);
    if (this.#group === 1) return address;
    this.#kernel.call.pool(address, this.#group, this.points, this.#pooled.address);
    return this.#pooled.address;
  }
}
