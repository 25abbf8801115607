import { randomUUID } from 'node:crypto';
import { mkdir, open, rename, rm, writeFile } from 'node:fs/promises';
import path from 'node:path';

export async function syncFile(file: string): Promise<void> {
  const handle = await open(file, 'r+');
  try {
    await handle.datasync();
  } finally {
    await handle.close();
  }
}

/** A rename is atomic, but it lasts only once the folder itself is on the disk. */
export async function syncFolder(folder: string): Promise<void> {
  const handle = await open(folder, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Writes a whole file so that readers see the old one or the new one, also after a power cut. */
export async function writeDurably(file: string, content: string | Uint8Array): Promise<void> {
  const temp = `${file}.${randomUUID()}.part`;
  await mkdir(path.dirname(file), { recursive: true });
  try {
    await writeFile(temp, content, { flag: 'wx' });
    await moveDurably(temp, file);
  } catch (error) {
    await rm(temp, { force: true });
    throw error;
  }
}

/** Gives a finished file of the same disk its final name. */
export async function moveDurably(temp: string, file: string): Promise<void> {
  await syncFile(temp);
  await rename(temp, file);
  await syncFolder(path.dirname(file));
}
