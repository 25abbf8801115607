import type { ByteSource } from './byte-source.ts';

const WINDOW_BYTES = 4096;

/** Reads `length` bytes at `offset`; fewer only at the end of the source. */
export type ReadBytes = (offset: number, length: number) => Promise<Uint8Array>;

/**
 * Reads through a small window, because a header is many reads of a few bytes that lie close together. Longer reads go straight
 * to the source; nothing is ever asked for beyond its end.
 */
export function windowReader(source: ByteSource): ReadBytes {
  let start = 0;
  let window = new Uint8Array(0);
  return async (offset, length) => {
    const wanted = Math.max(0, Math.min(length, source.sizeBytes - offset));
    if (wanted > WINDOW_BYTES) return source.read(offset, wanted);
    const isInside = offset >= start && offset + wanted <= start + window.length;
    if (!isInside) {
      start = offset;
      window = new Uint8Array(await source.read(offset, Math.min(WINDOW_BYTES, source.sizeBytes - offset)));
    }
    return window.subarray(offset - start, offset - start + wanted);
  };
}
