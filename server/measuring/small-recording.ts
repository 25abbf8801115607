import wavDecoder from 'wav-decoder';
import { bytesPerFrame, type SampleLayout } from '../../shared/audio/audio-format.ts';
import { wavEnvelope } from '../../shared/audio/wav-envelope.ts';

/** Samples of at most this many bytes are read whole when a file is opened. */
export const SMALL_RECORDING_BYTES = 256 * 1024;

/** The rate has no influence on the samples. */
const ANY_RATE_HZ = 48_000;

/**
 * Decodes whole frames with wav-decoder 1.3.0, behind a header of our own, so that it never sees the file's: it knows no extensible
 * header and no pad bytes, takes the last format chunk, and hangs or exhausts the memory on impossible ones.
 *
 * @returns one array per channel, in the convention of `decodeFrames`, but with what is not finite left as it is
 */
export function decodeWithWavDecoder(bytes: Uint8Array, layout: SampleLayout): Float32Array[] {
  const frames = Math.floor(bytes.length / bytesPerFrame(layout));
  const { encoding, bitsPerSample, channels } = layout;
  const { head } = wavEnvelope({ encoding, bitsPerSample, channels, sampleRateHz: ANY_RATE_HZ, frames });
  const file = new Uint8Array(head.length + frames * bytesPerFrame(layout));
  file.set(head);
  file.set(bytes.subarray(0, file.length - head.length), head.length);
  const { channelData } = wavDecoder.decode.sync(file.buffer, { symmetric: true });
  if (encoding === 'integer' && bitsPerSample === 8) return channelData.map(from8Bit);
  if (encoding === 'integer' && bitsPerSample === 24) return channelData.map(from24Bit);
  return channelData;
}

/** Its zero of 8 bits lies between two codes (127.5), which would give silence an offset; the format's zero is 128. */
function from8Bit(samples: Float32Array): Float32Array {
  return samples.map((sample) => (Math.round(sample * 127.5 + 127.5) - 128) / 128);
}

/** It reads the 24-bit minimum as +1, which no other code can give. */
function from24Bit(samples: Float32Array): Float32Array {
  return samples.map((sample) => (sample === 1 ? -1 : sample));
}
