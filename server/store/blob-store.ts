import type { Readable } from 'node:stream';

/** Half-open byte range. */
export interface ByteRange {
  start: number;
  end: number;
}

export interface StoredBlob {
  sha256: string;
  sizeBytes: number;
}

/** Bytes under their hash. A call that resolves means that the bytes survive a power cut; only then may a row name them. */
export interface BlobStore {
  /** Moves a finished file of the same disk into the store; its hash is the caller's to have checked. */
  putFile(tempPath: string, sha256: string): Promise<StoredBlob>;
  /** Stores a stream and tells its hash. */
  putStream(stream: Readable): Promise<StoredBlob>;
  has(sha256: string): Promise<boolean>;
  /** Throws `BlobMissingError` where nothing is stored under the hash. */
  sizeBytesOf(sha256: string): Promise<number>;
  open(sha256: string, range?: ByteRange): Promise<Readable>;
  /** Local path for readers that seek; it stays valid while the blob is stored. */
  pathOf(sha256: string): string;
  /** A fresh path on the store's own disk, for bytes on their way in. */
  tempPath(): string;
  delete(sha256: string): Promise<void>;
}

export class BlobMissingError extends Error {
  constructor(sha256: string) {
    super(`No bytes are stored under ${sha256}.`);
    this.name = 'BlobMissingError';
  }
}
