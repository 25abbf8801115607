/** Interleaves codes of 8, 16, 24 or 32 bits as little-endian two's complement; all arrays are of one length. */
export function encodeIntegers(channels: readonly Int32Array[], bitsPerSample: number): Uint8Array {
  const frames = channels[0]?.length ?? 0;
  const bytesPerSample = bitsPerSample / 8;
  const stride = channels.length * bytesPerSample;
  const bytes = new Uint8Array(frames * stride);
  for (const [channel, codes] of channels.entries()) {
    for (let i = 0, at = channel * bytesPerSample; i < frames; i++, at += stride) {
      const code = codes[i]!;
      for (let byte = 0; byte < bytesPerSample; byte++) bytes[at + byte] = code >> (8 * byte);
    }
  }
  return bytes;
}
