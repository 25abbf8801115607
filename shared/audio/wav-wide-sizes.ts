import { asciiText } from '../lib/byte-text.ts';

/** What a size field holds in RF64 and BW64 when the size is in ds64, and what a recorder leaves that never finished. */
export const SIZE_ELSEWHERE = 0xffffffff;
/** The fixed part and 64 table entries: no file has so many chunks above 4 GiB. */
export const DS64_READ_BYTES = 28 + 64 * 12;

/** 64-bit sizes by chunk id (EBU Tech 3306, 3.3; ITU-R BS.2088, 4.3). */
export type WideSizes = Map<string, number>;

/** Reads the body of a `ds64` chunk; a body too short to hold the data size gives no sizes. */
export function parseWideSizes(body: Uint8Array): WideSizes {
  const sizes: WideSizes = new Map();
  if (body.length < 28) return sizes;
  const view = new DataView(body.buffer, body.byteOffset, body.byteLength);
  sizes.set('data', uint64(view, 8));
  const entries = Math.min(view.getUint32(24, true), Math.floor((body.length - 28) / 12));
  for (let i = 0; i < entries; i++) {
    const at = 28 + i * 12;
    sizes.set(asciiText(body, at, 4), uint64(view, at + 4));
  }
  return sizes;
}

/** Exact up to 2^53; a larger value is larger than any file and only has to stay large. */
function uint64(view: DataView, at: number): number {
  return view.getUint32(at, true) + view.getUint32(at + 4, true) * 0x1_0000_0000;
}
