import type { AudioFormat } from '@shared/audio/audio-format.ts';
import { blobSource } from '@shared/audio/byte-source.ts';
import { personalMetadata } from '@shared/audio/personal-metadata.ts';
import type { PersonalFinding } from '@shared/audio/personal-metadata.ts';
import { readRecordingFile as readFacts } from '@shared/audio/recording-file.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';
import type { FileRefusal } from '@shared/audio/refused-file-error.ts';
import type { CameraOrigin } from '@shared/contract/camera.ts';
import type { DeclaredLayout } from '@shared/contract/layouts.ts';

/** What a file's header tells before a byte of it is sent. */
export interface FileReading {
  format: AudioFormat;
  /** Fields that could name a person or a place. */
  findings: PersonalFinding[];
  /** The film it was taken out of. */
  camera?: CameraOrigin;
}

/** What a file could be once it is declared how its samples lie, and of a text how it begins. */
export interface Undeclared {
  kind: DeclaredLayout['kind'];
  firstLines: string[];
}

export type ReadOutcome =
  | {
      reading: FileReading;
      /** What is sent in place of the chosen file. */
      takenOut?: File;
    }
  | { refusal: string; undeclared: Undeclared | null };

const declarableKinds: Readonly<Partial<Record<FileRefusal, DeclaredLayout['kind']>>> = {
  text: 'CSV',
  unknown: 'raw',
};

const shownBytes = 4096;
const shownLines = 6;
const shownCharacters = 160;

/** Reads the header of a chosen file; a file that cannot be brought in gives the sentence that says why. */
export async function readRecordingFile(
  file: Blob,
  layout: DeclaredLayout | null = null,
): Promise<ReadOutcome> {
  try {
    const { format, metadata } = await readFacts(blobSource(file), layout);
    return { reading: { format, findings: personalMetadata(metadata) } };
  } catch (error) {
    if (error instanceof RefusedFileError)
      return { refusal: error.message, undeclared: await undeclaredOf(file, error.code) };
    const refusal = 'The browser could not read this file. It may have been moved or changed.';
    return { refusal, undeclared: null };
  }
}

async function undeclaredOf(file: Blob, code: FileRefusal): Promise<Undeclared | null> {
  const kind = declarableKinds[code];
  if (kind === undefined) return null;
  return { kind, firstLines: kind === 'CSV' ? await firstLinesOf(file) : [] };
}

async function firstLinesOf(file: Blob): Promise<string[]> {
  const head = await file.slice(0, shownBytes).text();
  return head
    .split(/\r?\n/)
    .slice(0, shownLines)
    .map((line) => line.slice(0, shownCharacters));
}
