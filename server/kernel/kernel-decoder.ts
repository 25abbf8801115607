import { bytesPerFrame, type SampleLayout } from '../../shared/audio/audio-format.ts';
import type { FrameDecoder } from '../signal/frame-engine.ts';
import type { Kernel, KernelArray } from './kernel.ts';

const WIDTHS_BITS = { integer: [8, 16, 24, 32], float: [32, 64] };

/**
 * Decodes as `decodeFrames` of `shared/audio` does.
 *
 * @throws RangeError for widths it does not read, for more than `maximumBytes`, and where `out` is too short.
 */
export function kernelDecoder(kernel: Kernel, layout: SampleLayout, maximumBytes: number): FrameDecoder {
  const { encoding, bitsPerSample, channels } = layout;
  if (!WIDTHS_BITS[encoding].includes(bitsPerSample)) {
    throw new RangeError(`no decoder for ${encoding} samples of ${bitsPerSample} bits`);
  }
  const stride = bytesPerFrame(layout);
  const width = bitsPerSample / 8;
  const bytesHere = kernel.array(Uint8Array, maximumBytes);
  const samplesHere = kernel.array(Float32Array, Math.floor(maximumBytes / stride));
  const decodeLane = (address: number, frames: number, out: number): number => {
    if (encoding === 'float') return kernel.call.decodeFloat(address, stride, width, frames, out);
    kernel.call.decodeInteger(address, stride, width, frames, out);
    return 0;
  };
  return (bytes, out) => {
    const frames = Math.floor(bytes.length / stride);
    const address = placeBytes(kernel, bytes, bytesHere);
    const nonFiniteSamples = Array.from({ length: channels }, (_, channel) => {
      const samples = out[channel];
      if (!samples || samples.length < frames) {
        throw new RangeError(
          `out[${channel}] holds ${samples?.length ?? 0} samples, the block has ${frames} frames`,
        );
      }
      const lane = address + channel * width;
      const target = kernel.addressOf(samples);
      if (target !== undefined) return decodeLane(lane, frames, target);
      const found = decodeLane(lane, frames, samplesHere.address);
      samples.set(samplesHere.values.subarray(0, frames));
      return found;
    });
    return { frames, nonFiniteSamples };
  };
}

function placeBytes(kernel: Kernel, bytes: Uint8Array, room: KernelArray<Uint8Array>): number {
  if (bytes.length > room.values.length) {
    throw new RangeError(`bytes: ${bytes.length} are more than ${room.values.length}`);
  }
  const address = kernel.addressOf(bytes);
  if (address !== undefined) return address;
  room.values.set(bytes);
  return room.address;
}
