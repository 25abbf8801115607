import { readdir } from 'node:fs/promises';
import { join } from 'node:path';
import { readChunks } from './digests.ts';
import type { BagSource } from './verify-bag.ts';

/** An unpacked bag. A link or anything else that is no plain file or folder is refused. */
export async function directoryBag(directory: string): Promise<BagSource> {
  const paths = await filesBelow(directory, '');
  return { paths, open: async (path) => readChunks(join(directory, path)) };
}

async function filesBelow(root: string, below: string): Promise<string[]> {
  const entries = await readdir(join(root, below), { withFileTypes: true });
  const nested = entries.map(async (entry) => {
    const path = below === '' ? entry.name : `${below}/${entry.name}`;
    if (entry.isDirectory()) return filesBelow(root, path);
    if (entry.isFile()) return [path];
    throw new Error(`${path} is neither a file nor a folder.`);
  });
  return (await Promise.all(nested)).flat();
}
