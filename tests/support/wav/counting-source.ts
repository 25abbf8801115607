import type { ByteSource } from '../../../shared/audio/byte-source.ts';

export type CountingSource = ByteSource & {
  bytesRead: () => number;
  reads: () => number;
  /** Bytes asked for at once at most. */
  largestRead: () => number;
};

/** A source that keeps count of what was asked of it; `sizeBytes` may claim more than is there, the rest reads as zeros. */
export function countingSource(bytes: Uint8Array, sizeBytes = bytes.length): CountingSource {
  let [total, count, largest] = [0, 0, 0];
  return {
    sizeBytes,
    bytesRead: () => total,
    reads: () => count,
    largestRead: () => largest,
    read(offset, length) {
      if (offset < 0 || length < 0 || offset + length > sizeBytes) {
        throw new RangeError(
          `read of ${length} bytes at ${offset} leaves the ${sizeBytes} bytes of the file`,
        );
      }
      total += length;
      count += 1;
      largest = Math.max(largest, length);
      const out = new Uint8Array(length);
      out.set(bytes.subarray(offset, offset + length));
      return Promise.resolve(out);
    },
  };
}
