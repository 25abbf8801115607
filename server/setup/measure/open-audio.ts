import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { isZip } from '../../../shared/audio/capture-set.ts';
import { isFlac } from '../../../shared/audio/flac-header.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import { importRecording } from '../../importing/import-recording.ts';
import type { MeasureInput } from '../../measuring/measure-plan.ts';
import { withFileSource } from '../../store/file-source.ts';

export type OpenAudio = Pick<MeasureInput, 'filePath' | 'header'> & {
  /** Removes what was unpacked. */
  close: () => Promise<void>;
};

/** The file itself where it is WAV; what is packed becomes a WAV file in a temporary folder. Throws RefusedFileError. */
export async function openAudio(path: string): Promise<OpenAudio> {
  const isPacked = await withFileSource(path, async (source) => {
    const head = await source.read(0, 4);
    return isFlac(head) || isZip(head);
  });
  if (isPacked) return unpack(path);
  return {
    filePath: path,
    header: await withFileSource(path, readWavHeader),
    close: () => Promise.resolve(),
  };
}

async function unpack(path: string): Promise<OpenAudio> {
  const folder = await mkdtemp(join(tmpdir(), 'recalesce-unpacked-'));
  const close = () => rm(folder, { recursive: true, force: true });
  try {
    const filePath = join(folder, 'audio.wav');
    const { format } = await importRecording({ filePath: path, targetPath: filePath, layout: null });
    const header = await withFileSource(filePath, readWavHeader);
    return { filePath, header: { ...header, format }, close };
  } catch (error) {
    await close();
    throw error;
  }
}
