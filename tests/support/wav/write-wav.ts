import { encodeFrames } from '../../../server/setup/demo-audio/encode-frames.ts';
import { concatBytes, wavEnvelope, type WavChunk } from '../../../shared/audio/wav-envelope.ts';

export type WriteWavInput = {
  sampleRateHz: number;
  /** One array per channel, full scale 1, all of one length. */
  channels: Float32Array[];
  encoding?: 'integer' | 'float';
  bitsPerSample?: number;
  container?: 'RIFF' | 'RF64' | 'BW64';
  extensible?: boolean;
  validBits?: number;
  /** Chunks between the format and the samples. */
  extraChunks?: WavChunk[];
  /** Chunks after the samples. */
  chunksAfter?: WavChunk[];
};

/** A whole WAV file in memory; 16-bit integer unless told otherwise. */
export function writeWav(input: WriteWavInput): Uint8Array<ArrayBuffer> {
  const { sampleRateHz, channels, container, extensible, validBits, extraChunks, chunksAfter } = input;
  const layout = {
    encoding: input.encoding ?? 'integer',
    bitsPerSample: input.bitsPerSample ?? 16,
    channels: channels.length,
  };
  const { head, tail } = wavEnvelope({
    ...layout,
    sampleRateHz,
    frames: channels[0]?.length ?? 0,
    container,
    extensible,
    validBits,
    chunksBefore: extraChunks,
    chunksAfter,
  });
  return concatBytes([head, encodeFrames(channels, layout), tail]);
}
