import { createHash } from 'node:crypto';
import { createReadStream } from 'node:fs';

export const chunkBytes = 1024 * 1024;

/** Both digests of the bag, the payload's size, taken in one reading. */
export interface Digest {
  sizeBytes: number;
  sha256: string;
  sha512: string;
}

export type Bytes = AsyncIterable<Buffer> | Iterable<Buffer>;

/** Passes bytes on unchanged and hands over their digest after the last one, before the stream ends. */
export async function* withDigest(bytes: Bytes, onEnd: (digest: Digest) => void): AsyncGenerator<Buffer> {
  const sha256 = createHash('sha256');
  const sha512 = createHash('sha512');
  let sizeBytes = 0;
  for await (const chunk of bytes) {
    sha256.update(chunk);
    sha512.update(chunk);
    sizeBytes += chunk.length;
    yield chunk;
  }
  onEnd({ sizeBytes, sha256: sha256.digest('hex'), sha512: sha512.digest('hex') });
}

export function sha256Of(bytes: Buffer): string {
  return createHash('sha256').update(bytes).digest('hex');
}

export function readChunks(path: string): AsyncIterable<Buffer> {
  return createReadStream(path, { highWaterMark: chunkBytes });
}

/** A document in memory in the same chunks a file would come in. */
export function* bufferChunks(bytes: Buffer): Generator<Buffer> {
  for (let start = 0; start < bytes.length; start += chunkBytes)
    yield bytes.subarray(start, start + chunkBytes);
}
