import { createHash } from 'node:crypto';
import { createWriteStream } from 'node:fs';
import { Readable, Transform, type TransformCallback } from 'node:stream';
import { pipeline } from 'node:stream/promises';
import { ZipArchive } from 'archiver';
import { chunkBytes, type Bytes } from './digests.ts';

export interface ZipWriter {
  /** Writes one entry to its end. Entries come in the order of the calls; the next call waits for the last one. */
  add(name: string, bytes: Bytes): Promise<void>;
  /** Writes the directory of the archive; after it the file is whole. */
  finish(): Promise<{ sizeBytes: number; sha256: string }>;
  /** Gives up; the file is left as far as it came. */
  abandon(): Promise<void>;
}

export interface ZipWriterOptions {
  path: string;
  /** The date of every entry. */
  date: Date;
  signal?: AbortSignal;
}

const fileMode = 0o644;

/**
 * A ZIP file whose bytes depend on names, dates and contents alone: nothing is compressed (DEFLATE differs between builds
 * of Node), times are UTC, and every entry comes from a stream (a buffer would be written with another header). Every
 * warning of the library is a failure, because it only warns where a file is missing.
 */
export function openZipWriter({ path, date, signal }: ZipWriterOptions): ZipWriter {
  const archive = new ZipArchive({
    store: true,
    forceLocalTime: false,
    statConcurrency: 1,
    highWaterMark: chunkBytes,
  });
  archive.on('warning', (warning) => archive.destroy(warning));
  const measure = new MeasuringStream();
  const written = pipeline(archive, measure, createWriteStream(path, { flags: 'wx', mode: fileMode }), {
    signal,
  });
  // Its failure is awaited by whichever call comes next; until then it must not count as unhandled.
  written.catch(() => undefined);
  // The file is never whole before finish(), so an early end of the pipeline is a failure of the entry being written.
  const failed = written.then(() => Promise.reject(new Error('The archive ended before its last entry.')));
  failed.catch(() => undefined);
  return {
    add: (name, bytes) => addEntry({ archive, failed, name, bytes, date }),
    finish: async () => {
      archive.finalize().catch((error: Error) => archive.destroy(error));
      await written;
      return measure.result();
    },
    abandon: async () => {
      archive.destroy(new Error('The archive was given up.'));
      await written.catch(() => undefined);
    },
  };
}

interface EntryInput {
  archive: ZipArchive;
  failed: Promise<never>;
  name: string;
  bytes: Bytes;
  date: Date;
}

async function addEntry({ archive, failed, name, bytes, date }: EntryInput): Promise<void> {
  const source = Readable.from(bytes, { objectMode: false, highWaterMark: chunkBytes });
  source.on('error', (error) => archive.destroy(error));
  let onEntry: (entry: { name: string }) => void = () => undefined;
  const ended = new Promise<string>((resolve) => {
    onEntry = (entry) => resolve(entry.name);
  });
  archive.once('entry', onEntry);
  try {
    archive.append(source, { name, date, mode: fileMode });
    const writtenName = await Promise.race([ended, failed]);
    if (writtenName !== name) throw new Error(`The entry ${name} was written as ${writtenName}.`);
  } finally {
    archive.off('entry', onEntry);
    source.destroy();
  }
}

/** Counts and hashes what passes through. */
class MeasuringStream extends Transform {
  readonly #hash = createHash('sha256');
  #sizeBytes = 0;

  override _transform(chunk: Buffer, _encoding: BufferEncoding, done: TransformCallback): void {
    this.#hash.update(chunk);
    this.#sizeBytes += chunk.length;
    done(null, chunk);
  }

  result(): { sizeBytes: number; sha256: string } {
    return { sizeBytes: this.#sizeBytes, sha256: this.#hash.digest('hex') };
  }
}
