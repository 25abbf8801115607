import { createWriteStream } from 'node:fs';
import { open, stat } from 'node:fs/promises';
import type { Readable } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { DataStore, ERRORS, Upload } from '@tus/server';

interface TusStoreParts {
  pathOf: (uploadId: string) => string;
  findStream: (uploadId: string) => { sizeBytes: number; createdAtMs: number } | undefined;
}

/**
 * Bytes of uploads in files of ours. The ready-made file store is not used: it keeps sizes in files beside the bytes,
 * acknowledges what is not on the disk yet, truncates when a creation is repeated, and deletes finished uploads.
 */
export class TusStore extends DataStore {
  override readonly extensions = ['creation'];
  readonly #parts: TusStoreParts;

  constructor(parts: TusStoreParts) {
    super();
    this.#parts = parts;
  }

  override async create(upload: Upload): Promise<Upload> {
    const handle = await open(this.#parts.pathOf(upload.id), 'a', 0o600);
    await handle.close();
    return upload;
  }

  override async write(readable: Readable, id: string, offset: number): Promise<number> {
    const file = createWriteStream(this.#parts.pathOf(id), { flags: 'r+', start: offset, flush: true });
    try {
      await pipeline(readable, file);
    } catch (error) {
      throw isFull(error) ? noRoom : ERRORS.FILE_WRITE_ERROR;
    }
    return offset + file.bytesWritten;
  }

  override async getUpload(id: string): Promise<Upload> {
    const stream = this.#parts.findStream(id);
    const found = await stat(this.#parts.pathOf(id)).catch(() => null);
    if (stream === undefined || found === null) throw ERRORS.FILE_NOT_FOUND;
    const createdAt = new Date(stream.createdAtMs).toISOString();
    return new Upload({ id, size: stream.sizeBytes, offset: found.size, creation_date: createdAt });
  }
}

const noRoom = {
  status_code: 507,
  body: 'The server has no room left. What has arrived is kept; go on with the upload later.\n',
};

function isFull(error: unknown): boolean {
  return error instanceof Error && 'code' in error && (error.code === 'ENOSPC' || error.code === 'EDQUOT');
}
