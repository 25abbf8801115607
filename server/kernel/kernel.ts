import { readFileSync } from 'node:fs';
import type { EngineArray } from '../signal/frame-engine.ts';

/** The functions of `assembly`; addresses are in bytes, counts in samples, bins, rows. */
export interface KernelFunctions {
  frames(plan: number, samples: number, count: number, power: number, features: number): void;
  tableRows(
    features: number,
    stride: number,
    rows: number,
    bands: number,
    crossingsToHz: number,
    table: number,
  ): void;
  powerRows(
    plan: number,
    samples: number,
    count: number,
    firstBin: number,
    endBin: number,
    power: number,
    stride: number,
    meanSquares: number,
  ): void;
  codes(power: number, stride: number, rows: number, bins: number, group: number, out: number): void;
  raiseCodes(kept: number, codes: number, count: number): void;
  cells(
    samples: number,
    count: number,
    length: number,
    sums: number,
    squares: number,
    minima: number,
    maxima: number,
    scratch: number,
  ): void;
  blockSums(samples: number, blocks: number, length: number, sums: number): void;
  accumulate(
    rows: number,
    strideBytes: number,
    marks: number,
    count: number,
    points: number,
    maximum: number,
    sums: number,
    counts: number,
  ): void;
  pool(power: number, group: number, points: number, out: number): void;
  decodeInteger(bytes: number, stride: number, width: number, count: number, samples: number): void;
  decodeFloat(bytes: number, stride: number, width: number, count: number, samples: number): number;
  splitUpperHalf(
    input: number,
    quads: number,
    low: number,
    lowerHalf: number,
    upperHalf: number,
    state: number,
    factors: number,
  ): void;
  splitQuarters(
    input: number,
    quads: number,
    energies: number,
    lowLow: number,
    lowHigh: number,
    highLow: number,
    highHigh: number,
    state: number,
    factors: number,
  ): void;
  addOctaveCells(energies: number, cells: number, sums: number, gains: number): void;
  scanOctaveCells(
    sums: number,
    limits: number,
    hits: number,
    from: number,
    to: number,
    phase: number,
    validFrom: number,
  ): number;
  scanOctaveHalves(
    lower: number,
    upper: number,
    hits: number,
    from: number,
    to: number,
    lowerGain: number,
    upperGain: number,
    limit: number,
  ): number;
}

interface WasmMemory {
  readonly buffer: ArrayBuffer;
  grow(pages: number): number;
}

/** The part of the global of the same name that is used here; the types of Node.js do not have it. */
interface WebAssemblyApi {
  Memory: new (size: { initial: number }) => WasmMemory;
  Module: new (bytes: Uint8Array) => object;
  Instance: new (module: object, imports: object) => { exports: unknown };
}

const { WebAssembly: api } = globalThis as unknown as { WebAssembly: WebAssemblyApi };

const PAGE_BYTES = 65_536;
/** The first page holds the constants of the compiled module. */
const FIRST_FREE = PAGE_BYTES;
/** Between two arrays: what reads or writes a vector past the end of one stays out of the next. */
const GAP_BYTES = 64;

let compiled: object | undefined;

/** Compiled once per thread. */
function kernelModule(): object {
  compiled ??= new api.Module(readFileSync(new URL('./kernel.wasm', import.meta.url)));
  return compiled;
}

type ArrayType<T> = {
  readonly BYTES_PER_ELEMENT: number;
  new (buffer: ArrayBuffer, byteOffset: number, length: number): T;
};

/** An array in the memory of the kernel. Memory that grows is a new buffer, so the view is renewed when it has changed. */
export class KernelArray<T extends { readonly buffer: ArrayBufferLike }> implements EngineArray<T> {
  readonly address: number;
  readonly #kernel: Kernel;
  readonly #view: () => T;
  #values: T;

  constructor(kernel: Kernel, address: number, view: () => T) {
    this.address = address;
    this.#kernel = kernel;
    this.#view = view;
    this.#values = view();
  }

  get values(): T {
    if (this.#values.buffer !== this.#kernel.buffer) this.#values = this.#view();
    return this.#values;
  }
}

/** An instance of the kernel with a memory of its own, which grows only while something new is set up. */
export class Kernel {
  readonly call: KernelFunctions;
  readonly #memory = new api.Memory({ initial: 1 });
  #buffer = this.#memory.buffer;
  #next = FIRST_FREE + GAP_BYTES;

  /** @throws Error where `kernel.wasm` has not been built. */
  constructor() {
    const instance = new api.Instance(kernelModule(), { env: { memory: this.#memory } });
    this.call = instance.exports as KernelFunctions;
  }

  get buffer(): ArrayBuffer {
    return this.#buffer;
  }

  /** Forgets every array, so that their memory can be handed out anew. */
  clear(): void {
    new Uint8Array(this.buffer, FIRST_FREE).fill(0);
    this.#next = FIRST_FREE + GAP_BYTES;
  }

  /** Zeroed memory for `length` elements, beginning at a multiple of 64 bytes. */
  array<T extends { readonly buffer: ArrayBufferLike }>(type: ArrayType<T>, length: number): KernelArray<T> {
    const address = this.#next;
    const end = address + length * type.BYTES_PER_ELEMENT;
    this.#next = Math.ceil((end + GAP_BYTES) / GAP_BYTES) * GAP_BYTES;
    const missing = Math.ceil((this.#next - this.buffer.byteLength) / PAGE_BYTES);
    if (missing > 0) {
      this.#memory.grow(missing);
      this.#buffer = this.#memory.buffer;
    }
    return new KernelArray(this, address, () => new type(this.buffer, address, length));
  }

  /** Where an array lies, if it lies in this kernel's memory. */
  addressOf(values: { readonly buffer: ArrayBufferLike; readonly byteOffset: number }): number | undefined {
    return values.buffer === this.buffer ? values.byteOffset : undefined;
  }

  /**
   * Address of the samples `[from, to)`; those of another memory are copied to `staging`.
   *
   * @throws RangeError where there are no such samples, or more than `staging` holds.
   */
  place(samples: Float32Array, from: number, to: number, staging: KernelArray<Float32Array>): number {
    if (from < 0 || to < from || to > samples.length || to - from > staging.values.length) {
      throw new RangeError(
        `samples: ${from} to ${to} are not within ${samples.length}, or over ${staging.values.length}`,
      );
    }
    const address = this.addressOf(samples);
    if (address !== undefined) return address + from * Float32Array.BYTES_PER_ELEMENT;
    staging.values.set(samples.subarray(from, to));
    return staging.address;
  }
}
