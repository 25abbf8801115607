import { mkdirSync } from 'node:fs';
import { mkdir, readFile, rename, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';
import { z } from 'zod';
import { bytesPerFrame } from '../../../shared/audio/audio-format.ts';
import { audioFormatSchema } from '../../../shared/contract/measurement.ts';
import { formatBytes } from '../../../shared/lib/format-bytes.ts';
import type { ImportControls } from '../../importing/import-controls.ts';
import type { Imported, ImportInput } from '../../importing/import-recording.ts';
import { syncFile, syncFolder } from '../../store/durable-file.ts';
import { freeBytesAt } from '../../store/free-space.ts';
import type { RecordingRow } from './recordings.queries.ts';

interface Parts {
  folder: string;
  /** Unpacks in a thread of its own. */
  importRecording: (input: ImportInput, controls: ImportControls) => Promise<Imported>;
  freeBytes?: (folder: string) => Promise<number>;
}

export interface WorkingCopy extends Imported {
  filePath: string;
}

type Source = Pick<RecordingRow, 'id' | 'format' | 'layout'>;

const importedSchema = z.object({ format: audioFormatSchema });
const keptFreeBytes = 2 ** 30;

export type WorkingCopies = ReturnType<typeof createWorkingCopies>;

/**
 * WAV files beside the stored bytes of what came in as something else: `<recording>/audio.wav`, and `imported.json` with what was
 * found on the way. Whatever is missing is made anew from the stored bytes, so that nothing here needs a backup.
 */
export function createWorkingCopies({ folder, importRecording, freeBytes = freeBytesAt }: Parts) {
  mkdirSync(folder, { recursive: true });
  const running = new Map<string, Promise<WorkingCopy>>();

  /** Two who ask at once share one run. */
  function ensure(source: Source, storedPath: string, controls: ImportControls = {}): Promise<WorkingCopy> {
    const present = running.get(source.id);
    if (present !== undefined) return present;
    const started = findOrMake(source, storedPath, controls).finally(() => running.delete(source.id));
    running.set(source.id, started);
    return started;
  }

  async function findOrMake(
    source: Source,
    storedPath: string,
    controls: ImportControls,
  ): Promise<WorkingCopy> {
    const own = path.join(folder, source.id);
    const found = await readFile(path.join(own, 'imported.json'), 'utf8').catch(() => null);
    if (found !== null) return { ...importedSchema.parse(JSON.parse(found)), filePath: wavIn(own) };
    await requireRoom(source);
    return make(source, storedPath, controls);
  }

  async function make(source: Source, storedPath: string, controls: ImportControls): Promise<WorkingCopy> {
    const own = path.join(folder, source.id);
    const unfinished = `${own}.part`;
    await rm(unfinished, { recursive: true, force: true });
    await mkdir(unfinished, { recursive: true });
    const input = { filePath: storedPath, targetPath: wavIn(unfinished), layout: source.layout };
    const { format } = await importRecording(input, controls);
    const facts = path.join(unfinished, 'imported.json');
    await writeFile(facts, JSON.stringify({ format }));
    await syncFile(facts);
    await syncFolder(unfinished);
    await rename(unfinished, own);
    await syncFolder(folder);
    return { format, filePath: wavIn(own) };
  }

  async function requireRoom({ format }: Source): Promise<void> {
    const neededBytes = format.frames * bytesPerFrame(format);
    if ((await freeBytes(folder)) - neededBytes >= keptFreeBytes) return;
    throw new Error(
      `The server has no room to unpack this recording, which takes ${formatBytes(neededBytes)}. Whoever runs it has to make some.`,
    );
  }

  return { ensure };
}

function wavIn(folder: string): string {
  return path.join(folder, 'audio.wav');
}
