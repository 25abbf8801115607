import { decodeText } from '../lib/byte-text.ts';
import type { ByteSource } from './byte-source.ts';
import { RefusedFileError } from './refused-file-error.ts';

/** A file in a ZIP archive. */
export type ZipEntry = {
  name: string;
  sizeBytes: number;
  /** Byte of the archive at which its local header begins. */
  headerOffset: number;
  isStored: boolean;
};

type Directory = { offset: number; sizeBytes: number; entries: number };

/** PKWARE APPNOTE 6.3.10: 4.3.16 end of central directory, 4.3.14 and 4.3.15 its ZIP64 forms, 4.3.12 central header, 4.3.7 local one. */
const END_BYTES = 22;
const END_SIGNATURE = 0x06054b50;
const WIDE_LOCATOR_SIGNATURE = 0x07064b50;
const WIDE_END_SIGNATURE = 0x06064b50;
const CENTRAL_SIGNATURE = 0x02014b50;
const LOCAL_SIGNATURE = 0x04034b50;
const LONGEST_COMMENT_BYTES = 0xffff;
const WIDE_EXTRA = 0x0001;
const ELSEWHERE = 0xffffffff;
const STORED = 0;

/** Reads the list of files of an archive. Throws RefusedFileError; allocates no more than `mostDirectoryBytes` of what it claims. */
export async function readZipDirectory(source: ByteSource, mostDirectoryBytes: number): Promise<ZipEntry[]> {
  const directory = await findDirectory(source);
  const isInside = directory.offset + directory.sizeBytes <= source.sizeBytes;
  if (!isInside || directory.sizeBytes > mostDirectoryBytes) throw broken();
  const bytes = await source.read(directory.offset, directory.sizeBytes);
  const entries: ZipEntry[] = [];
  for (let at = 0; entries.length < directory.entries;) {
    const { entry, end } = centralEntry(bytes, at);
    entries.push(entry);
    at = end;
  }
  requireApart(entries, source.sizeBytes);
  return entries;
}

/** Files that share bytes would let a small archive claim a large one. */
function requireApart(entries: readonly ZipEntry[], archiveBytes: number): void {
  const storedBytes = entries.reduce((sum, entry) => sum + (entry.isStored ? entry.sizeBytes : 0), 0);
  if (storedBytes > archiveBytes) throw broken();
}

/** The bytes of a stored file, in place. Throws RefusedFileError where the archive does not hold them. */
export async function zipEntrySource(source: ByteSource, entry: ZipEntry): Promise<ByteSource> {
  if (entry.headerOffset + 30 > source.sizeBytes) throw broken();
  const head = viewOf(await source.read(entry.headerOffset, 30));
  if (head.getUint32(0, true) !== LOCAL_SIGNATURE) throw broken();
  const start = entry.headerOffset + 30 + head.getUint16(26, true) + head.getUint16(28, true);
  if (start + entry.sizeBytes > source.sizeBytes) throw broken();
  return {
    sizeBytes: entry.sizeBytes,
    read: (offset, length) =>
      source.read(start + offset, Math.max(0, Math.min(length, entry.sizeBytes - offset))),
  };
}

async function findDirectory(source: ByteSource): Promise<Directory> {
  const start = Math.max(0, source.sizeBytes - END_BYTES - LONGEST_COMMENT_BYTES);
  const tail = viewOf(await source.read(start, source.sizeBytes - start));
  for (let at = tail.byteLength - END_BYTES; at >= 0; at--) {
    if (tail.getUint32(at, true) !== END_SIGNATURE) continue;
    const directory = {
      entries: tail.getUint16(at + 10, true),
      sizeBytes: tail.getUint32(at + 12, true),
      offset: tail.getUint32(at + 16, true),
    };
    const isWide = at >= 20 && tail.getUint32(at - 20, true) === WIDE_LOCATOR_SIGNATURE;
    return isWide ? wideDirectory(source, uint64(tail, at - 20 + 8)) : directory;
  }
  throw broken();
}

async function wideDirectory(source: ByteSource, offset: number): Promise<Directory> {
  if (offset + 56 > source.sizeBytes) throw broken();
  const end = viewOf(await source.read(offset, 56));
  if (end.getUint32(0, true) !== WIDE_END_SIGNATURE) throw broken();
  return { entries: uint64(end, 32), sizeBytes: uint64(end, 40), offset: uint64(end, 48) };
}

function centralEntry(bytes: Uint8Array, at: number): { entry: ZipEntry; end: number } {
  if (at + 46 > bytes.length) throw broken();
  const view = viewOf(bytes.subarray(at));
  if (view.getUint32(0, true) !== CENTRAL_SIGNATURE) throw broken();
  const [nameBytes, extraBytes, commentBytes] = [28, 30, 32].map((place) => view.getUint16(place, true));
  const nameEnd = 46 + nameBytes!;
  const end = nameEnd + extraBytes! + commentBytes!;
  if (at + end > bytes.length) throw broken();
  const extra = bytes.subarray(at + nameEnd, at + nameEnd + extraBytes!);
  const wide = wideNumbers(extra);
  const [packed, unpacked, offset] = [20, 24, 42].map((place) => view.getUint32(place, true));
  // The wide numbers stand in this order, and only those that are all ones in the header.
  const sizeBytes = unpacked === ELSEWHERE ? wide.next() : unpacked!;
  if (packed === ELSEWHERE) wide.next();
  const headerOffset = offset === ELSEWHERE ? wide.next() : offset!;
  const name = decodeText(bytes.subarray(at + 46, at + nameEnd));
  const isStored = view.getUint16(10, true) === STORED && (view.getUint16(8, true) & 1) === 0;
  return { entry: { name, sizeBytes, headerOffset, isStored }, end: at + end };
}

function wideNumbers(extra: Uint8Array): { next: () => number } {
  const view = viewOf(extra);
  for (let at = 0; at + 4 <= extra.length; at += 4 + view.getUint16(at + 2, true)) {
    if (view.getUint16(at, true) !== WIDE_EXTRA) continue;
    let place = at + 4;
    return {
      next() {
        if (place + 8 > extra.length) throw broken();
        place += 8;
        return uint64(view, place - 8);
      },
    };
  }
  return {
    next() {
      throw broken();
    },
  };
}

function viewOf(bytes: Uint8Array): DataView {
  return new DataView(bytes.buffer, bytes.byteOffset, bytes.byteLength);
}

/** Exact up to 2^53; a larger value is larger than any file. */
function uint64(view: DataView, at: number): number {
  return view.getUint32(at, true) + view.getUint32(at + 4, true) * 0x1_0000_0000;
}

function broken(): RefusedFileError {
  return new RefusedFileError(
    'damaged',
    'The ZIP archive is damaged or cut short: its list of files cannot be read.',
  );
}
