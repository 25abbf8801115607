import type { AudioContainer } from './audio-format.ts';

export type FileKind = {
  /** Without a dot; what a file of this kind is called in an archive. */
  extension: string;
  mediaType: string;
};

const WAV: FileKind = { extension: 'wav', mediaType: 'audio/vnd.wave' };

/** Names of the files as they were brought in. */
export const FILE_KINDS: Record<AudioContainer, FileKind> = {
  RIFF: WAV,
  RF64: WAV,
  BW64: WAV,
  FLAC: { extension: 'flac', mediaType: 'audio/flac' },
  raw: { extension: 'raw', mediaType: 'application/octet-stream' },
  CSV: { extension: 'csv', mediaType: 'text/csv' },
  'capture-set': { extension: 'zip', mediaType: 'application/zip' },
};
