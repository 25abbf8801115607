type Encode = (bytes: Uint8Array, at: number, stride: number, codes: Int32Array) => void;

// One loop for each width: a shared one with a loop over bytes in it costs several times as much.
const ENCODERS: Record<number, Encode> = {
  8(bytes, first, stride, codes) {
    for (let i = 0, at = first; i < codes.length; i++, at += stride) bytes[at] = codes[i]!;
  },
  16(bytes, first, stride, codes) {
    for (let i = 0, at = first; i < codes.length; i++, at += stride) {
      const code = codes[i]!;
      bytes[at] = code;
      bytes[at + 1] = code >> 8;
    }
  },
  24(bytes, first, stride, codes) {
    for (let i = 0, at = first; i < codes.length; i++, at += stride) {
      const code = codes[i]!;
      bytes[at] = code;
      bytes[at + 1] = code >> 8;
      bytes[at + 2] = code >> 16;
    }
  },
};

/** Interleaves codes of 8, 16 or 24 bits as little-endian two's complement; all arrays are of one length. */
export function encodeIntegers(channels: readonly Int32Array[], bitsPerSample: number): Uint8Array {
  const encode = ENCODERS[bitsPerSample];
  if (!encode) throw new RangeError(`no encoder for integers of ${bitsPerSample} bits`);
  const bytesPerSample = bitsPerSample / 8;
  const stride = channels.length * bytesPerSample;
  const bytes = new Uint8Array((channels[0]?.length ?? 0) * stride);
  for (const [channel, codes] of channels.entries()) encode(bytes, channel * bytesPerSample, stride, codes);
  return bytes;
}
