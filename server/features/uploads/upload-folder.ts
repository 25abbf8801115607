import { mkdirSync } from 'node:fs';
import { readdir, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { ProblemError } from '../../http/problem.ts';
import { freeBytesAt } from '../../store/free-space.ts';

/** Room that uploads never take: the database, views and archives have to go on. */
export const keptFreeBytes = 2 ** 30;

interface UploadFolderParts {
  folder: string;
  freeBytes?: (folder: string) => Promise<number>;
}

export type UploadFolder = ReturnType<typeof createUploadFolder>;

/** Where bytes wait until they are whole: one file for each upload, named by its id. */
export function createUploadFolder({ folder, freeBytes = freeBytesAt }: UploadFolderParts) {
  mkdirSync(folder, { recursive: true });
  const pathOf = (name: string) => path.join(folder, name);

  async function receivedBytes(uploadId: string): Promise<number> {
    const found = await stat(pathOf(uploadId)).catch(() => null);
    return found?.size ?? 0;
  }

  async function heldBytes(): Promise<number> {
    const sizes = await Promise.all((await readdir(folder)).map(receivedBytes));
    return sizes.reduce((sum, size) => sum + size, 0);
  }

  async function requireRoom(incomingBytes: number): Promise<void> {
    if ((await freeBytes(folder)) - incomingBytes >= keptFreeBytes) return;
    throw new ProblemError(
      'storage-full',
      'The server has no room for this file now. Whoever runs it has to make some; try again later.',
    );
  }

  async function mtimeMs(name: string): Promise<number> {
    const found = await stat(pathOf(name)).catch(() => null);
    return found?.mtimeMs ?? Number.POSITIVE_INFINITY;
  }

  return {
    folder,
    pathOf,
    receivedBytes,
    heldBytes,
    requireRoom,
    mtimeMs,
    names: () => readdir(folder),
    remove: (name: string) => rm(pathOf(name), { force: true }),
  };
}
