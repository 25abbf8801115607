import type { AudioFormat } from '@shared/audio/audio-format.ts';
import { blobSource } from '@shared/audio/byte-source.ts';
import { personalMetadata } from '@shared/audio/personal-metadata.ts';
import type { PersonalFinding } from '@shared/audio/personal-metadata.ts';
import { readWavHeader } from '@shared/audio/wav-header.ts';
import { readWavMetadata } from '@shared/audio/wav-metadata.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';

/** What a file's header tells before a byte of it is sent. */
export interface FileReading {
  format: AudioFormat;
  /** Fields that could name a person or a place. */
  findings: PersonalFinding[];
}

export type ReadOutcome = { reading: FileReading } | { refusal: string };

/** Reads the header of a chosen file; a file that cannot be brought in gives the sentence that says why. */
export async function readRecordingFile(file: Blob): Promise<ReadOutcome> {
  try {
    const { format, metadata } = await readWavHeader(blobSource(file));
    return { reading: { format, findings: personalMetadata(readWavMetadata(metadata)) } };
  } catch (error) {
    if (error instanceof RefusedFileError) return { refusal: error.message };
    return { refusal: 'The browser could not read this file. It may have been moved or changed.' };
  }
}
