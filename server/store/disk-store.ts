import { createHash, randomUUID } from 'node:crypto';
import { createWriteStream, mkdirSync } from 'node:fs';
import { mkdir, open, rename, rm, stat } from 'node:fs/promises';
import path from 'node:path';
import { Readable, Transform } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { BlobMissingError, type BlobStore, type ByteRange, type StoredBlob } from './blob-store.ts';
import { syncFile, syncFolder } from './durable-file.ts';

/** Files in two levels of folders, `ab/cd/abcd…`, below one root. */
export function createDiskStore(root: string): BlobStore {
  const incoming = path.join(root, 'incoming');
  mkdirSync(incoming, { recursive: true });
  const tempPath = () => path.join(incoming, randomUUID());

  function pathOf(sha256: string): string {
    if (!/^[0-9a-f]{64}$/.test(sha256))
      throw new RangeError(`sha256 must be 64 hexadecimal digits, not ${sha256}`);
    return path.join(root, sha256.slice(0, 2), sha256.slice(2, 4), sha256);
  }

  async function putFile(source: string, sha256: string): Promise<StoredBlob> {
    const target = pathOf(sha256);
    await syncFile(source);
    const { size } = await stat(source);
    const folder = path.dirname(target);
    const firstMade = await mkdir(folder, { recursive: true });
    await rename(source, target);
    await syncFolder(folder);
    if (firstMade !== undefined) await syncFoldersUpTo(folder, root);
    return { sha256, sizeBytes: size };
  }

  async function putStream(stream: Readable): Promise<StoredBlob> {
    const temp = tempPath();
    const hash = createHash('sha256');
    try {
      await pipeline(stream, hashing(hash), createWriteStream(temp, { flags: 'wx' }));
      return await putFile(temp, hash.digest('hex'));
    } catch (error) {
      await rm(temp, { force: true });
      throw error;
    }
  }

  async function sizeBytesOf(sha256: string): Promise<number> {
    const found = await statOrNull(pathOf(sha256));
    if (found === null) throw new BlobMissingError(sha256);
    return found.size;
  }

  async function openBlob(sha256: string, range?: ByteRange): Promise<Readable> {
    const sizeBytes = await sizeBytesOf(sha256);
    if (range !== undefined) assertRange(range, sizeBytes);
    const file = await open(pathOf(sha256), 'r');
    if (range === undefined) return file.createReadStream();
    if (range.start === range.end) {
      await file.close();
      return emptyStream();
    }
    return file.createReadStream({ start: range.start, end: range.end - 1 });
  }

  return {
    putFile,
    putStream,
    sizeBytesOf,
    open: openBlob,
    pathOf,
    tempPath,
    has: async (sha256) => (await statOrNull(pathOf(sha256))) !== null,
    delete: (sha256) => rm(pathOf(sha256), { force: true }),
  };
}

async function syncFoldersUpTo(folder: string, root: string): Promise<void> {
  for (let at = folder; at !== root;) {
    at = path.dirname(at);
    await syncFolder(at);
  }
}

function hashing(hash: { update(chunk: Buffer): unknown }): Transform {
  return new Transform({
    transform(chunk: Buffer, _encoding, done) {
      hash.update(chunk);
      done(null, chunk);
    },
  });
}

async function statOrNull(file: string) {
  try {
    return await stat(file);
  } catch (error) {
    if (error instanceof Error && 'code' in error && error.code === 'ENOENT') return null;
    throw error;
  }
}

function assertRange({ start, end }: ByteRange, sizeBytes: number): void {
  if (start < 0 || end < start || end > sizeBytes) {
    throw new RangeError(`range must lie within 0 and ${sizeBytes}, not ${start} to ${end}`);
  }
}

function emptyStream(): Readable {
  return Readable.from([]);
}
