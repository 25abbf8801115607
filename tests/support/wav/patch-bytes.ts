import { asciiText } from '../../../shared/lib/byte-text.ts';

/** A copy with a little-endian number of 16 or 32 bits put at a place. */
export function withUint16(bytes: Uint8Array, offset: number, value: number): Uint8Array {
  const copy = bytes.slice();
  new DataView(copy.buffer).setUint16(offset, value, true);
  return copy;
}

export function withUint32(bytes: Uint8Array, offset: number, value: number): Uint8Array {
  const copy = bytes.slice();
  new DataView(copy.buffer).setUint32(offset, value, true);
  return copy;
}

/** Where the head of the first chunk with this id stands. */
export function chunkOffset(bytes: Uint8Array, id: string): number {
  const view = new DataView(bytes.buffer, bytes.byteOffset);
  for (let at = 12; at + 8 <= bytes.length;) {
    if (asciiText(bytes, at, 4) === id) return at;
    const sizeBytes = view.getUint32(at + 4, true);
    at += 8 + sizeBytes + (sizeBytes % 2);
  }
  throw new RangeError(`no chunk ${id}`);
}
