import { writeSync } from 'node:fs';
import type { FileRegion } from './view-layout.ts';

const FLOAT_BYTES = Float32Array.BYTES_PER_ELEMENT;
const PAIR_BYTES = 2 * FLOAT_BYTES;

/** Fills a region of a file in order, in writes of some size; several regions of one file grow side by side. */
export class RegionWriter {
  readonly #fileDescriptor: number;
  readonly #buffer: Uint8Array;
  readonly #floats: Float32Array;
  readonly #endBytes: number;
  #position: number;
  #filled = 0;

  constructor(fileDescriptor: number, region: FileRegion, bufferBytes: number) {
    this.#fileDescriptor = fileDescriptor;
    this.#position = region.offsetBytes;
    this.#endBytes = region.offsetBytes + region.sizeBytes;
    const wantedBytes = Math.min(bufferBytes, Math.max(1, region.sizeBytes));
    this.#buffer = new Uint8Array(Math.ceil(wantedBytes / PAIR_BYTES) * PAIR_BYTES);
    this.#floats = new Float32Array(this.#buffer.buffer);
  }

  /** Two float32, in a region that holds nothing else. @throws RangeError past the end of the region. */
  writePair(first: number, second: number): void {
    this.#checkRoom(PAIR_BYTES);
    if (this.#filled === this.#buffer.length) this.flush();
    const at = this.#filled / FLOAT_BYTES;
    this.#floats[at] = first;
    this.#floats[at + 1] = second;
    this.#filled += PAIR_BYTES;
  }

  /** @throws RangeError past the end of the region: another one begins there. */
  write(bytes: Uint8Array): void {
    this.#checkRoom(bytes.length);
    if (bytes.length > this.#buffer.length - this.#filled) this.flush();
    if (bytes.length > this.#buffer.length) {
      this.#put(bytes);
      return;
    }
    this.#buffer.set(bytes, this.#filled);
    this.#filled += bytes.length;
  }

  flush(): void {
    if (this.#filled === 0) return;
    this.#put(this.#buffer.subarray(0, this.#filled));
    this.#filled = 0;
  }

  /** Throws unless the region was filled: a hole would read as silence. */
  finish(): void {
    this.flush();
    if (this.#position !== this.#endBytes) {
      throw new RangeError(`region: ${this.#endBytes - this.#position} bytes were never written`);
    }
  }

  #checkRoom(bytes: number): void {
    if (this.#position + this.#filled + bytes > this.#endBytes) {
      throw new RangeError(`bytes: ${bytes} more do not fit into the region`);
    }
  }

  #put(bytes: Uint8Array): void {
    let written = 0;
    while (written < bytes.length) {
      const rest = bytes.length - written;
      written += writeSync(this.#fileDescriptor, bytes, written, rest, this.#position + written);
    }
    this.#position += bytes.length;
  }
}
