import { bytesPerFrame, type SampleLayout } from './audio-format.ts';

export type DecodedFrames = {
  frames: number;
  /** Per channel: samples that were NaN, infinite, or (64-bit float) too large for 32 bits. Each is stored as 0. */
  nonFiniteSamples: number[];
};

/** Where the samples of one channel lie: `count` of them from `first`, `stride` bytes apart. */
type Lane = { view: DataView; first: number; stride: number; count: number };

/**
 * Splits the whole frames of a block into one Float32 channel each, full scale 1.
 *
 * Integers of n bits are divided by 2^(n-1), the same for both signs, so that -2^(n-1) is exactly -1 and no code reaches +1;
 * 8-bit samples are unsigned about 128. Floats pass as they are, 64-bit ones narrowed.
 *
 * @param bytes a block of a `data` chunk that begins with a frame; an incomplete frame at its end is left out
 * @param format width and kind of the samples, number of channels
 * @param out one array per channel, each at least as long as the block has whole frames; written from index 0
 * @returns the frames written and, per channel, how many samples were not finite
 * @throws RangeError where `out` is too short or has too few channels, or the width is none of 8, 16, 24, 32 (integer), 32, 64 (float)
 *
 * Not a number and infinity are stored as 0 and counted, so that nothing computed from the channels can become NaN.
 * Cost: one pass, no allocation that grows with the block.
 */
export function decodeFrames(bytes: Uint8Array, format: SampleLayout, out: Float32Array[]): DecodedFrames {
  const frames = Math.floor(bytes.length / bytesPerFrame(format));
  const nonFiniteSamples: number[] = [];
  for (let channel = 0; channel < format.channels; channel++) {
    const samples = out[channel] ?? new Float32Array(0);
    nonFiniteSamples.push(decodeChannel(bytes, format, channel, samples));
  }
  return { frames, nonFiniteSamples };
}

/**
 * The samples of one channel alone, as `decodeFrames` gives them: the others are not looked at.
 *
 * @returns how many samples were not finite
 * @throws RangeError as `decodeFrames`
 */
export function decodeChannel(
  bytes: Uint8Array,
  format: SampleLayout,
  channel: number,
  out: Float32Array,
): number {
  const stride = bytesPerFrame(format);
  const frames = Math.floor(bytes.length / stride);
  const decodeLane = laneDecoder(format);
  if (out.length < frames) {
    throw new RangeError(`out[${channel}] holds ${out.length} samples, the block has ${frames} frames`);
  }
  const view = new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  const first = (channel * format.bitsPerSample) / 8;
  return decodeLane({ view, first, stride, count: frames }, out);
}

function laneDecoder(format: SampleLayout): (lane: Lane, out: Float32Array) => number {
  const decoder = LANE_DECODERS[`${format.encoding}${format.bitsPerSample}`];
  if (!decoder)
    throw new RangeError(`no decoder for ${format.encoding} samples of ${format.bitsPerSample} bits`);
  return decoder;
}

// One loop for each width: a shared loop calling a reader for every sample costs several times as much.
const LANE_DECODERS: Record<string, (lane: Lane, out: Float32Array) => number> = {
  integer8({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) out[i] = (view.getUint8(at) - 128) / 128;
    return 0;
  },

  integer16({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) out[i] = view.getInt16(at, true) / 32768;
    return 0;
  },

  integer24({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) {
      // The signed upper half carries the sign, so that 0x800000 is -1.
      out[i] = (view.getInt16(at + 1, true) * 256 + view.getUint8(at)) / 8388608;
    }
    return 0;
  },

  integer32({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) out[i] = view.getInt32(at, true) / 2147483648;
    return 0;
  },

  float32({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) out[i] = view.getFloat32(at, true);
    return zeroNonFinite(out, count);
  },

  float64({ view, first, stride, count }, out) {
    for (let i = 0, at = first; i < count; i++, at += stride) out[i] = view.getFloat64(at, true);
    return zeroNonFinite(out, count);
  },
};

/** Puts 0 for every one of the first `count` samples that is not a number or infinite, and tells how many there were. */
export function zeroNonFinite(samples: Float32Array, count: number): number {
  let found = 0;
  for (let i = 0; i < count; i++) {
    const sample = samples[i]!;
    // x - x is 0 for every finite number and NaN for all others.
    if (sample - sample === 0) continue;
    samples[i] = 0;
    found++;
  }
  return found;
}
