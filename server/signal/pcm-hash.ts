import { createHash } from 'node:crypto';

/** Samples under one hash. Segments that are measured apart begin at multiples of it. */
export const PCM_CHUNK_SAMPLES = 1 << 20;
const DIGEST_BYTES = 32;
const PIECE_SAMPLES = 1 << 16;

/** The hashes of the chunks of one stretch of a channel, one after the other; plain data. */
export interface PcmHashPart {
  digests: Uint8Array;
}

/**
 * Hashes the samples of one channel as they sound, whatever file they are wrapped in.
 *
 * Definition `pcm-1`: the samples as float32 re full scale (integers of n bits over 2^(n-1)), little-endian; sha256 of each
 * 1,048,576 of them from the first sample on, the last chunk as long as it is; the hash of the channel is the sha256 of those
 * digests, each 32 bytes, in order. So 16 bits, the same 16 bits in 24 and the same in floats have one hash, and so has each
 * channel by itself. Beyond 24 bits nothing is told apart, and a zero of floats has no sign.
 *
 * Cost: 4 bytes of sha256 per sample, 2 to 3 ns.
 */
export class PcmHashTracker {
  readonly #digests: Uint8Array[] = [];
  readonly #unsigned: Float32Array | null;
  #hash = createHash('sha256');
  #filled = 0;

  /** @param encoding of the samples as they are stored. */
  constructor(encoding: 'integer' | 'float') {
    this.#unsigned = encoding === 'float' ? new Float32Array(PIECE_SAMPLES) : null;
  }

  push(samples: Float32Array, from: number, to: number): void {
    let at = from;
    while (at < to) {
      const end = Math.min(to, at + PCM_CHUNK_SAMPLES - this.#filled, at + PIECE_SAMPLES);
      this.#hash.update(this.#bytesOf(samples, at, end));
      this.#filled += end - at;
      at = end;
      if (this.#filled === PCM_CHUNK_SAMPLES) this.#closeChunk();
    }
  }

  finish(): PcmHashPart {
    if (this.#filled > 0) this.#closeChunk();
    const digests = new Uint8Array(this.#digests.length * DIGEST_BYTES);
    for (const [k, digest] of this.#digests.entries()) digests.set(digest, k * DIGEST_BYTES);
    return { digests };
  }

  #bytesOf(samples: Float32Array, from: number, to: number): Uint8Array {
    const unsigned = this.#unsigned;
    if (!unsigned) return new Uint8Array(samples.buffer, samples.byteOffset + 4 * from, 4 * (to - from));
    // -0 + 0 is 0.
    for (let i = from; i < to; i++) unsigned[i - from] = samples[i]! + 0;
    return new Uint8Array(unsigned.buffer, 0, 4 * (to - from));
  }

  #closeChunk(): void {
    this.#digests.push(this.#hash.digest());
    this.#hash = createHash('sha256');
    this.#filled = 0;
  }
}

/** @returns the hash of a channel in hexadecimal, from the parts of its segments in order. */
export function joinPcmHash(parts: readonly PcmHashPart[]): string {
  const hash = createHash('sha256');
  for (const { digests } of parts) hash.update(digests);
  return hash.digest('hex');
}
