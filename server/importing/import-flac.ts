import { createHash, type Hash } from 'node:crypto';
import { stat } from 'node:fs/promises';
import { cutShortWarning, type FlacHeader } from '../../shared/audio/flac-header.ts';
import { RefusedFileError } from '../../shared/audio/refused-file-error.ts';
import { BrokenFlacError, flacBlocks, type FlacBlock } from './flac-frames.ts';
import type { ImportControls } from './import-controls.ts';
import { encodeIntegers } from './encode-integers.ts';
import type { WavFileWriter } from './wav-file-writer.ts';

/**
 * Unpacks a FLAC file into a WAV file. What comes out is held against the length and the checksum that the file gives, so that
 * neither a damaged file nor a fault of the decoder becomes a recording.
 *
 * @returns warnings beside those of the header
 * @throws RefusedFileError where the file is damaged before its end
 */
export async function importFlac(
  filePath: string,
  header: FlacHeader,
  writer: WavFileWriter,
  { onProgress, signal }: ImportControls,
): Promise<string[]> {
  const { sampleRateHz, bitsPerSample, channels, frames } = header.format;
  const stream = { sampleRateHz, bitsPerSample, channels, maxBlockFrames: header.maxBlockFrames };
  const { size } = await stat(filePath);
  const md5 = createHash('md5');
  try {
    for await (const block of flacBlocks(filePath, stream)) {
      signal?.throwIfAborted();
      const isInPlace = block.startFrame === writer.frames && block.startFrame + block.frames <= frames;
      if (!isInPlace) throw damaged();
      writeBlock(block, bitsPerSample, writer, md5);
      onProgress?.(block.bytesRead / size);
    }
  } catch (error) {
    if (!(error instanceof BrokenFlacError)) throw error;
  }
  return judge(header, writer.frames, md5);
}

function writeBlock({ channels }: FlacBlock, bitsPerSample: number, writer: WavFileWriter, md5: Hash): void {
  const signed = encodeIntegers(channels, bitsPerSample);
  md5.update(signed);
  // WAV holds 8 bits as offset binary, FLAC sums them up as two's complement.
  if (bitsPerSample === 8) for (let i = 0; i < signed.length; i++) signed[i]! ^= 0x80;
  writer.write(signed);
}

/** Short by less than a block it was cut within its last frame; anything else is damage. */
function judge({ format, md5: announced, maxBlockFrames }: FlacHeader, frames: number, md5: Hash): string[] {
  const missing = format.frames - frames;
  if (frames === 0 || missing > maxBlockFrames) throw damaged();
  if (missing > 0) return [cutShortWarning(frames, format.frames)];
  const isWhole = format.warnings.length === 0 && announced !== undefined;
  if (isWhole && md5.digest('hex') !== announced) throw damaged();
  return [];
}

function damaged(): RefusedFileError {
  return new RefusedFileError(
    'damaged',
    'The FLAC file is damaged: what it unpacks to is not what its header says. Bring in another copy of it.',
  );
}
