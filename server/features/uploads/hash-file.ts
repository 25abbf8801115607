import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';

const blockBytes = 1 << 20;

/** sha256 of a file of any length; a megabyte at a time, so that requests are answered in between. */
export async function hashFile(file: string): Promise<string> {
  const hash = createHash('sha256');
  const blocks: AsyncIterable<Buffer> = createReadStream(file, { highWaterMark: blockBytes });
  for await (const block of blocks) hash.update(block);
  return hash.digest('hex');
}
