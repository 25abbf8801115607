import { asciiText } from '../lib/byte-text.ts';
import { formatBytes } from '../lib/format-bytes.ts';
import type { AudioFormat } from './audio-format.ts';
import type { ByteSource } from './byte-source.ts';
import { foreignFileRefusal } from './foreign-file.ts';
import { walkChunks, type MetadataChunk, type WalkedChunks } from './wav-chunks.ts';
import type { DataExtent } from './wav-data-extent.ts';
import type { FormatChunk } from './wav-format-chunk.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { windowReader } from './window-reader.ts';

export type WavHeader = {
  format: AudioFormat;
  /** Bits of each sample that carry signal, at most `format.bitsPerSample`. */
  validBits: number;
  /** Bytes of one frame. */
  blockAlign: number;
  dataOffset: number;
  /** Bytes of the whole frames that are there: `format.frames * blockAlign`. */
  dataBytes: number;
  metadata: MetadataChunk[];
};

const HEAD_BYTES = 512;

/**
 * Reads the header of a WAV file and checks it against the file's real size. Accepts what can be measured, with warnings in
 * `format.warnings`; throws RefusedFileError, whose message is a sentence for the person who chose the file.
 */
export async function readWavHeader(source: ByteSource): Promise<WavHeader> {
  if (source.sizeBytes === 0) throw new RefusedFileError('empty', 'The file is empty.');
  const read = windowReader(source);
  const container = containerOf(await read(0, HEAD_BYTES));
  const chunks = await walkChunks(read, source.sizeBytes);
  const { format, data } = requireAudio(chunks);
  const frames = Math.floor(data.presentBytes / format.blockAlign);
  if (frames === 0) {
    throw new RefusedFileError(
      'no-frames',
      'The file has a correct header but not a single whole frame of audio.',
    );
  }
  const warnings = [
    ...format.warnings,
    ...chunks.warnings,
    ...data.warnings,
    ...extentWarnings(format, data, frames),
  ];
  const { encoding, bitsPerSample, channels, sampleRateHz, extensible, blockAlign, validBits } = format;
  return {
    format: { container, encoding, bitsPerSample, channels, sampleRateHz, frames, extensible, warnings },
    validBits,
    blockAlign,
    dataOffset: data.dataOffset,
    dataBytes: frames * blockAlign,
    metadata: chunks.metadata,
  };
}

function containerOf(head: Uint8Array): AudioFormat['container'] {
  const id = asciiText(head, 0, 4);
  const isContainer = id === 'RIFF' || id === 'RF64' || id === 'BW64';
  if (!isContainer || asciiText(head, 8, 4) !== 'WAVE') throw foreignFileRefusal(head);
  return id;
}

function requireAudio(chunks: WalkedChunks): { format: FormatChunk; data: DataExtent } {
  const { format, data, brokenAt } = chunks;
  const breakOff = brokenAt === undefined ? '' : ` Its list of chunks breaks off at byte ${brokenAt}.`;
  if (!format) {
    throw new RefusedFileError(
      'no-format',
      `The file has no format chunk, so nothing says how its samples lie.${breakOff}`,
    );
  }
  if (!data)
    throw new RefusedFileError('no-data', `The file has a WAV header but no audio in it.${breakOff}`);
  return { format, data };
}

function extentWarnings(format: FormatChunk, data: DataExtent, frames: number): string[] {
  const missingBytes = (data.promisedBytes ?? data.presentBytes) - data.presentBytes;
  if (missingBytes > 0) return [truncationWarning(data, missingBytes, frames)];
  const restBytes = data.presentBytes - frames * format.blockAlign;
  if (restBytes === 0) return [];
  return [`The audio ends within a frame; its last ${restBytes} bytes were left out.`];
}

function truncationWarning(data: DataExtent, missingBytes: number, frames: number): string {
  const share = ((100 * missingBytes) / (data.presentBytes + missingBytes)).toPrecision(2);
  return `The file is cut short: ${formatBytes(missingBytes)} of audio are missing (${Number(share)} % of what its header says). The ${frames.toLocaleString('en')} whole frames that are there were taken.`;
}
