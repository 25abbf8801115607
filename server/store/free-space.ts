import { statfs } from 'node:fs/promises';

/** Bytes that the process may still write on the disk of a folder. */
export async function freeBytesAt(folder: string): Promise<number> {
  const { bavail, bsize } = await statfs(folder);
  return bavail * bsize;
}
