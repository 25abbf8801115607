import { bytesPerFrame, type SampleLayout } from '../../../shared/audio/audio-format.ts';

type Lane = { view: DataView; first: number; stride: number };

/** Interleaves one array per channel into the bytes of a data chunk; integers are rounded and stop at full scale. */
export function encodeFrames(channels: Float32Array[], layout: SampleLayout): Uint8Array {
  const frames = channels[0]?.length ?? 0;
  const stride = bytesPerFrame(layout);
  const view = new DataView(new ArrayBuffer(frames * stride));
  const encodeLane = LANE_ENCODERS[`${layout.encoding}${layout.bitsPerSample}`];
  if (!encodeLane)
    throw new RangeError(`no encoder for ${layout.encoding} samples of ${layout.bitsPerSample} bits`);
  channels.forEach((samples, channel) => {
    encodeLane({ view, first: (channel * layout.bitsPerSample) / 8, stride }, samples);
  });
  return new Uint8Array(view.buffer);
}

function toInteger(sample: number, fullScale: number): number {
  const code = Math.round(sample * fullScale);
  if (code >= fullScale) return fullScale - 1;
  return code < -fullScale ? -fullScale : code;
}

const LANE_ENCODERS: Record<string, (lane: Lane, samples: Float32Array) => void> = {
  integer8({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) {
      view.setUint8(at, toInteger(samples[i]!, 128) + 128);
    }
  },

  integer16({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) {
      view.setInt16(at, toInteger(samples[i]!, 32768), true);
    }
  },

  integer24({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) {
      const code = toInteger(samples[i]!, 8388608);
      view.setUint8(at, code & 0xff);
      view.setInt16(at + 1, code >> 8, true);
    }
  },

  integer32({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) {
      view.setInt32(at, toInteger(samples[i]!, 2147483648), true);
    }
  },

  float32({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) view.setFloat32(at, samples[i]!, true);
  },

  float64({ view, first, stride }, samples) {
    for (let i = 0, at = first; i < samples.length; i++, at += stride) view.setFloat64(at, samples[i]!, true);
  },
};
