import { foreignFileRefusal } from '@shared/audio/foreign-file.ts';
import { RefusedFileError } from '@shared/audio/refused-file-error.ts';
import type { DeclaredLayout } from '@shared/contract/layouts.ts';
import { hashFile } from '@/composables/uploads/hash-file.ts';
import type { ReadWatch } from '@/composables/uploads/read-watch.ts';
import { readRecordingFile, type ReadOutcome } from '@/composables/uploads/read-recording-file.ts';

const headBytes = 12;

/** Reads what a chosen file is; of a film, takes its sound out first. */
export async function readChosenFile(
  file: File,
  layout: DeclaredLayout | null = null,
  watch: ReadWatch = {},
): Promise<ReadOutcome> {
  if (layout !== null || !(await isFilm(file))) return readRecordingFile(file, layout);
  const hashing = hashFile(file);
  try {
    const { takeSoundOut } = await import('@/composables/uploads/film/take-sound-out.ts');
    const sound = await takeSoundOut(file, watch);
    const outcome = await readRecordingFile(sound.file);
    if (!('reading' in outcome)) return outcome;
    const camera = { ...sound.camera, sha256: (await hashing.sha256) ?? null };
    return { reading: { ...outcome.reading, camera }, takenOut: sound.file };
  } catch (error) {
    const isTold = error instanceof RefusedFileError;
    const refusal = isTold
      ? error.message
      : 'What takes the sound out of films could not be loaded. Choose it again.';
    return { refusal, undeclared: null };
  } finally {
    hashing.stop();
  }
}

async function isFilm(file: Blob): Promise<boolean> {
  const head = await file
    .slice(0, headBytes)
    .arrayBuffer()
    .catch(() => new ArrayBuffer(0));
  return foreignFileRefusal(new Uint8Array(head)).code === 'film';
}
