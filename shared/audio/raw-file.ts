import { bytesPerFrame, type AudioFormat } from './audio-format.ts';
import type { RawLayout } from './declared-layout.ts';
import { UNREAD_KEY, type MetadataField } from './metadata-field.ts';
import { RefusedFileError } from './refused-file-error.ts';

/**
 * What a declared layout makes of a file of so many bytes. Throws RefusedFileError where the two do not fit, since a wrong width or
 * number of channels turns sound into noise without a word.
 */
export function rawFileFacts(
  sizeBytes: number,
  layout: RawLayout,
): { format: AudioFormat; metadata: MetadataField[] } {
  const { bitsPerSample, channels, sampleRateHz, headerBytes } = layout;
  const encoding = layout.encoding === 'float' ? 'float' : 'integer';
  const samples = { encoding, bitsPerSample, channels } as const;
  const frames = wholeFrames(sizeBytes, headerBytes, bytesPerFrame(samples));
  const format: AudioFormat = {
    container: 'raw',
    ...samples,
    sampleRateHz,
    frames,
    extensible: false,
    warnings: [],
  };
  return { format, metadata: unreadHeader(headerBytes) };
}

function wholeFrames(sizeBytes: number, headerBytes: number, frameBytes: number): number {
  const dataBytes = sizeBytes - headerBytes;
  if (dataBytes < frameBytes) {
    throw new RefusedFileError(
      'layout',
      `The file has ${count(sizeBytes)} bytes, and with ${count(headerBytes)} passed over not a single frame of ${frameBytes} bytes is left.`,
    );
  }
  const restBytes = dataBytes % frameBytes;
  if (restBytes === 0) return dataBytes / frameBytes;
  throw new RefusedFileError(
    'layout',
    `The file has ${count(dataBytes)} bytes behind the ${count(headerBytes)} that are passed over. They are no whole number of frames of ${frameBytes} bytes: ${restBytes} are left over. Check the width, the number of channels and the length of the header.`,
  );
}

function count(bytes: number): string {
  return bytes.toLocaleString('en');
}

function unreadHeader(headerBytes: number): MetadataField[] {
  return headerBytes === 0 ? [] : [{ chunk: 'header', key: UNREAD_KEY, value: `${headerBytes} bytes` }];
}

/** True where the samples lie as in a WAV file, so that they can be read where they are. */
export function liesLikeWav({ encoding, bitsPerSample, byteOrder }: RawLayout): boolean {
  if (bitsPerSample === 8) return encoding === 'unsigned';
  return byteOrder === 'little' && encoding !== 'unsigned';
}
