import { mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { isZip } from '../../../shared/audio/capture-set.ts';
import { isFlac } from '../../../shared/audio/flac-header.ts';
import { liesLikeWav } from '../../../shared/audio/raw-file.ts';
import { readRecordingFile } from '../../../shared/audio/recording-file.ts';
import { readWavHeader } from '../../../shared/audio/wav-header.ts';
import type { StoredLayout } from '../../../shared/contract/layouts.ts';
import { importRecording } from '../../importing/import-recording.ts';
import type { MeasureInput } from '../../measuring/measure-plan.ts';
import { withFileSource } from '../../store/file-source.ts';

export type OpenAudio = Pick<MeasureInput, 'filePath' | 'header' | 'joints'> & {
  /** Removes what was unpacked. */
  close: () => Promise<void>;
};

/**
 * The file itself where its samples lie as in WAV; anything else becomes a WAV file in a temporary folder.
 * @param layout as declared for files without a header; one that has its own is refused then.
 * @throws RefusedFileError
 */
export async function openAudio(path: string, layout: StoredLayout | null): Promise<OpenAudio> {
  if (layout !== null) return openDeclared(path, layout);
  const isPacked = await withFileSource(path, async (source) => {
    const head = await source.read(0, 4);
    return isFlac(head) || isZip(head);
  });
  if (isPacked) return unpack(path, null);
  return inPlace(path, await withFileSource(path, readWavHeader));
}

async function openDeclared(path: string, layout: StoredLayout): Promise<OpenAudio> {
  const { format } = await withFileSource(path, (source) => readRecordingFile(source, layout));
  if (layout.kind !== 'raw' || !liesLikeWav(layout)) return unpack(path, layout);
  return inPlace(path, { format, dataOffset: layout.headerBytes });
}

function inPlace(filePath: string, header: OpenAudio['header']): OpenAudio {
  return { filePath, header, close: () => Promise.resolve() };
}

async function unpack(path: string, layout: StoredLayout | null): Promise<OpenAudio> {
  const folder = await mkdtemp(join(tmpdir(), 'recalesce-unpacked-'));
  const close = () => rm(folder, { recursive: true, force: true });
  try {
    const filePath = join(folder, 'audio.wav');
    const { format, joints = [] } = await importRecording({ filePath: path, targetPath: filePath, layout });
    const header = await withFileSource(filePath, readWavHeader);
    return { filePath, header: { ...header, format }, joints, close };
  } catch (error) {
    await close();
    throw error;
  }
}
