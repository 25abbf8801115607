import { createReadStream } from 'node:fs';
import { bytesPerFrame, type AudioFormat } from '../../shared/audio/audio-format.ts';
import type { RawLayout } from '../../shared/audio/declared-layout.ts';
import type { ImportControls } from './import-controls.ts';
import type { WavFileWriter } from './wav-file-writer.ts';

const PIECE_BYTES = 1024 * 1024;
const SIGN_BIT = 0x80;

/** Turns declared samples into those of a WAV file: least byte first, and offset binary for 8 bits alone. */
export async function importRaw(
  filePath: string,
  layout: RawLayout,
  format: AudioFormat,
  writer: WavFileWriter,
  { onProgress, signal }: ImportControls,
): Promise<void> {
  const bytes = layout.bitsPerSample / 8;
  const dataBytes = format.frames * bytesPerFrame(format);
  const start = layout.headerBytes;
  let rest: Uint8Array = new Uint8Array(0);
  let done = 0;
  const place = { start, end: start + dataBytes - 1, highWaterMark: PIECE_BYTES };
  const stream: AsyncIterable<Buffer> = createReadStream(filePath, place);
  for await (const piece of stream) {
    signal?.throwIfAborted();
    const joined = rest.length === 0 ? new Uint8Array(piece) : Buffer.concat([rest, piece]);
    const whole = joined.subarray(0, joined.length - (joined.length % bytes));
    rest = joined.slice(whole.length);
    writer.write(toWavOrder(whole, layout));
    done += piece.length;
    onProgress?.(done / dataBytes);
  }
}

/** Changes `samples` in place. */
export function toWavOrder(
  samples: Uint8Array,
  { encoding, bitsPerSample, byteOrder }: RawLayout,
): Uint8Array {
  const width = bitsPerSample / 8;
  if (byteOrder === 'big' && width > 1) reverseEach(samples, width);
  const hasOtherSign = width === 1 ? encoding === 'signed' : encoding === 'unsigned';
  if (hasOtherSign) for (let at = width - 1; at < samples.length; at += width) samples[at]! ^= SIGN_BIT;
  return samples;
}

function reverseEach(samples: Uint8Array, width: number): void {
  for (let at = 0; at + width <= samples.length; at += width) samples.subarray(at, at + width).reverse();
}
