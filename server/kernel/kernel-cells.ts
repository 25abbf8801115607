import type { BlockSummer, CellRange, CellSummer, CellTable } from '../signal/frame-engine.ts';
import { CELL_SAMPLES } from '../signal/sample-cells.ts';
import type { Kernel, KernelArray } from './kernel.ts';

const FLOAT_BYTES = Float32Array.BYTES_PER_ELEMENT;
const DOUBLE_BYTES = Float64Array.BYTES_PER_ELEMENT;
const SCRATCH_FLOATS = 8;

class KernelCells implements CellTable {
  count = 0;
  readonly samples: Uint32Array;
  readonly #kernel: Kernel;
  readonly #sums: KernelArray<Float64Array>;
  readonly #squares: KernelArray<Float64Array>;
  readonly #minima: KernelArray<Float32Array>;
  readonly #maxima: KernelArray<Float32Array>;
  readonly #scratch: KernelArray<Float32Array>;
  readonly #staging: KernelArray<Float32Array>;

  constructor(kernel: Kernel, maximumCells: number) {
    this.samples = new Uint32Array(maximumCells);
    this.#kernel = kernel;
    this.#sums = kernel.array(Float64Array, maximumCells);
    this.#squares = kernel.array(Float64Array, maximumCells);
    this.#minima = kernel.array(Float32Array, maximumCells);
    this.#maxima = kernel.array(Float32Array, maximumCells);
    this.#scratch = kernel.array(Float32Array, SCRATCH_FLOATS);
    this.#staging = kernel.array(Float32Array, maximumCells * CELL_SAMPLES);
  }

  get sums(): Float64Array {
    return this.#sums.values;
  }

  get squares(): Float64Array {
    return this.#squares.values;
  }

  get minima(): Float32Array {
    return this.#minima.values;
  }

  get maxima(): Float32Array {
    return this.#maxima.values;
  }

  fill(samples: Float32Array, { from, to, startSample }: CellRange): void {
    const room = (CELL_SAMPLES - (startSample % CELL_SAMPLES)) % CELL_SAMPLES;
    const head = Math.min(room, to - from);
    const whole = Math.floor((to - from - head) / CELL_SAMPLES);
    const tail = to - from - head - whole * CELL_SAMPLES;
    const address = this.#kernel.place(samples, from, to, this.#staging);
    this.count = 0;
    this.#add(address, head > 0 ? 1 : 0, head);
    this.#add(address + head * FLOAT_BYTES, whole, CELL_SAMPLES);
    this.#add(address + (to - from - tail) * FLOAT_BYTES, tail > 0 ? 1 : 0, tail);
  }

  #add(address: number, cells: number, length: number): void {
    const at = this.count;
    this.count += cells;
    if (this.count > this.samples.length) {
      throw new RangeError(`cells: ${this.count} are more than ${this.samples.length}`);
    }
    this.samples.fill(length, at, this.count);
    this.#kernel.call.cells(
      address,
      cells,
      length,
      this.#sums.address + at * DOUBLE_BYTES,
      this.#squares.address + at * DOUBLE_BYTES,
      this.#minima.address + at * FLOAT_BYTES,
      this.#maxima.address + at * FLOAT_BYTES,
      this.#scratch.address,
    );
  }
}

export function kernelCellSummer(kernel: Kernel, maximumCells: number): CellSummer {
  const cells = new KernelCells(kernel, maximumCells);
  return (samples, range) => {
    cells.fill(samples, range);
    return cells;
  };
}

export function kernelBlockSummer(kernel: Kernel, length: number, maximumBlocks: number): BlockSummer {
  const sums = kernel.array(Float64Array, maximumBlocks);
  const staging = kernel.array(Float32Array, maximumBlocks * length);
  return (samples, from, count) => {
    const address = kernel.place(samples, from, from + count * length, staging);
    kernel.call.blockSums(address, count, length, sums.address);
    return sums.values.subarray(0, count);
  };
}
