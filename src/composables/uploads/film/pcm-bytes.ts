import type { SampleLayout } from '@shared/audio/audio-format.ts';

type Width = Pick<SampleLayout, 'encoding' | 'bitsPerSample'>;

/** Uncompressed samples of films, by the names of the reader of films. */
const widths: Readonly<Record<string, Width>> = {
  'pcm-u8': { encoding: 'integer', bitsPerSample: 8 },
  'pcm-s8': { encoding: 'integer', bitsPerSample: 8 },
  'pcm-s16': { encoding: 'integer', bitsPerSample: 16 },
  'pcm-s24': { encoding: 'integer', bitsPerSample: 24 },
  'pcm-s32': { encoding: 'integer', bitsPerSample: 32 },
  'pcm-f32': { encoding: 'float', bitsPerSample: 32 },
  'pcm-f64': { encoding: 'float', bitsPerSample: 64 },
};

/** The width of uncompressed samples; undefined where the codec has to be decoded. */
export function pcmWidth(codec: string): Width | undefined {
  return widths[codec.replace(/be$/, '')];
}

/** The same samples as a WAV file holds them: lowest byte first, 8 bits without a sign. No sample changes its value. */
export function toWavBytes(bytes: Uint8Array, codec: string): Uint8Array<ArrayBuffer> {
  const copy = new Uint8Array(bytes);
  if (codec === 'pcm-s8') return copy.map((byte) => byte ^ 0x80);
  if (!codec.endsWith('be')) return copy;
  const sampleBytes = (pcmWidth(codec)?.bitsPerSample ?? 8) / 8;
  for (let at = 0; at + sampleBytes <= copy.length; at += sampleBytes) {
    copy.subarray(at, at + sampleBytes).reverse();
  }
  return copy;
}
