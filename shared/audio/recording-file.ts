import type { AudioFormat } from './audio-format.ts';
import type { ByteSource } from './byte-source.ts';
import { isZip, readCaptureSet, type CaptureSet } from './capture-set.ts';
import { readCsvFile } from './csv-file.ts';
import type { DeclaredLayout } from './declared-layout.ts';
import { isFlac, readFlacHeader } from './flac-header.ts';
import type { MetadataField } from './metadata-field.ts';
import { rawFileFacts } from './raw-file.ts';
import { RefusedFileError } from './refused-file-error.ts';
import { readWavHeader } from './wav-header.ts';
import { readWavMetadata } from './wav-metadata.ts';

/** What can be told of a file that is brought in before its samples are looked at. */
export type RecordingFile = {
  format: AudioFormat;
  metadata: MetadataField[];
  /** Of a capture set. */
  captures?: Pick<CaptureSet, 'segments' | 'liveTimeNs'>;
};

/**
 * Reads what a file says of itself, or what was declared of one that says nothing. Its name has no say. Throws RefusedFileError,
 * whose message is a sentence for the person who chose the file.
 */
export async function readRecordingFile(
  source: ByteSource,
  layout: DeclaredLayout | null = null,
): Promise<RecordingFile> {
  if (layout === null) return readSelfTelling(source);
  await refuseSelfTelling(source);
  if (layout.kind === 'raw') return rawFileFacts(source.sizeBytes, layout);
  const { format, metadata } = await readCsvFile(source, layout);
  return { format, metadata };
}

async function readSelfTelling(source: ByteSource): Promise<RecordingFile> {
  const head = await source.read(0, 4);
  if (isZip(head)) {
    const { format, metadata, ...captures } = await readCaptureSet(source);
    return { format, metadata, captures };
  }
  if (isFlac(head)) {
    const { format, metadata } = await readFlacHeader(source);
    return { format, metadata };
  }
  const { format, metadata } = await readWavHeader(source);
  return { format, metadata: readWavMetadata(metadata) };
}

/** A layout over a file that needs none would turn its header into sound. */
async function refuseSelfTelling(source: ByteSource): Promise<void> {
  const told = await readSelfTelling(source).catch(() => undefined);
  if (told === undefined) return;
  const { container } = told.format;
  const name = container === 'FLAC' ? 'FLAC file' : container === 'capture-set' ? 'capture set' : 'WAV file';
  throw new RefusedFileError(
    'layout',
    `This is a ${name}, which says itself how its samples lie. Bring it in without a declared layout.`,
  );
}
