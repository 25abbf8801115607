import { open, readdir, rename, rm } from 'node:fs/promises';
import { dirname, join } from 'node:path';

/** Forces what was written to the disk: after it, a crash loses nothing of this file. */
export async function syncToDisk(path: string): Promise<void> {
  const handle = await open(path, 'r');
  try {
    await handle.sync();
  } finally {
    await handle.close();
  }
}

/** Gives a finished file its name in one step, and makes the name itself durable. */
export async function publishFile(partPath: string, path: string): Promise<void> {
  await rename(partPath, path);
  await syncToDisk(dirname(path));
}

export async function writeDurably(path: string, partPath: string, text: string): Promise<void> {
  const handle = await open(partPath, 'wx', 0o644);
  try {
    await handle.writeFile(text, 'utf8');
    await handle.sync();
  } finally {
    await handle.close();
  }
  await publishFile(partPath, path);
}

/** What a crash left behind of earlier attempts at the same file. */
export async function removeStaleParts(directory: string, fileName: string): Promise<void> {
  const names = await readdir(directory);
  const stale = names.filter((name) => name.startsWith(`${fileName}.`) && name.endsWith('.part'));
  await Promise.all(stale.map((name) => rm(join(directory, name), { force: true })));
}
