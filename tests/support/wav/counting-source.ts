import type { ByteSource } from '../../../shared/audio/byte-source.ts';

/** A source that keeps count of what was asked of it; `sizeBytes` may claim more than is there, the rest reads as zeros. */
export function countingSource(
  bytes: Uint8Array,
  sizeBytes = bytes.length,
): ByteSource & { bytesRead: () => number } {
  let total = 0;
  return {
    sizeBytes,
    bytesRead: () => total,
    read(offset, length) {
      if (offset < 0 || length < 0 || offset + length > sizeBytes) {
        throw new RangeError(
          `read of ${length} bytes at ${offset} leaves the ${sizeBytes} bytes of the file`,
        );
      }
      total += length;
      const out = new Uint8Array(length);
      out.set(bytes.subarray(offset, offset + length));
      return Promise.resolve(out);
    },
  };
}
