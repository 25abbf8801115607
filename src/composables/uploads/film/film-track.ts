import { AudioSampleSink, EncodedPacketSink, type InputAudioTrack } from 'mediabunny';
import { pcmWidth, toWavBytes } from '@/composables/uploads/film/pcm-bytes.ts';
import type { SoundLayout } from '@/composables/uploads/film/wav-pieces.ts';

/** Sound of a film in the order in which it is heard. */
export interface SoundPiece {
  layout: SoundLayout;
  bytes: Uint8Array<ArrayBuffer>;
  /** Of its first sample, on the clock of the film, which shows its first picture at 0 or later. */
  timestampS: number;
}

/** The sound of a track: uncompressed samples as they are, all else decoded to 32-bit floating-point numbers. */
export async function* soundPieces(track: InputAudioTrack, codec: string): AsyncGenerator<SoundPiece> {
  const width = pcmWidth(codec);
  if (width === undefined) return yield* decodedPieces(track);
  const channels = await track.getNumberOfChannels();
  const layout = { ...width, channels, sampleRateHz: Math.round(await track.getSampleRate()) };
  for await (const packet of new EncodedPacketSink(track).packets()) {
    yield { layout, bytes: toWavBytes(packet.data, codec), timestampS: packet.timestamp };
  }
}

async function* decodedPieces(track: InputAudioTrack): AsyncGenerator<SoundPiece> {
  for await (const sample of new AudioSampleSink(track).samples()) {
    const { numberOfChannels: channels, sampleRate, timestamp: timestampS } = sample;
    const bytes = new Uint8Array(sample.allocationSize({ planeIndex: 0, format: 'f32' }));
    sample.copyTo(bytes, { planeIndex: 0, format: 'f32' });
    sample.close();
    const sampleRateHz = Math.round(sampleRate);
    yield { layout: { encoding: 'float', bitsPerSample: 32, channels, sampleRateHz }, bytes, timestampS };
  }
}
