import { crc32 } from 'node:zlib';
import { openPromise, type Entry, type ZipFile } from 'yauzl';
import type { DigestedFile } from './bag-files.ts';
import type { Bytes } from './digests.ts';
import { verifyBag, type BagSource, type ReadingOptions } from './verify-bag.ts';

export interface ArchiveReport {
  /** Empty where the archive may be published. */
  problems: string[];
  /** The one folder everything lies in; empty where there is not exactly one. */
  baseDirectory: string;
  /** Relative to the base directory, in byte order. */
  files: DigestedFile[];
}

const stored = 0;

/**
 * Reads an archive by a library that had no part in writing it, and checks every entry's size, CRC-32 and both digests
 * against the manifests inside. Throws only when it is aborted or the disk fails; whatever is wrong with the archive is told in the report.
 */
export async function verifyArchive(path: string, options: ReadingOptions = {}): Promise<ArchiveReport> {
  const report: ArchiveReport = { problems: [], baseDirectory: '', files: [] };
  let zip: ZipFile;
  try {
    zip = await openPromise(path, { lazyEntries: true, autoClose: false, strictFileNames: true });
  } catch (error) {
    return { ...report, problems: [`The archive cannot be opened: ${messageOf(error)}.`] };
  }
  try {
    return await verifyOpened(zip, options);
  } catch (error) {
    if (options.signal?.aborted) throw error;
    return { ...report, problems: [`The archive cannot be read: ${messageOf(error)}.`] };
  } finally {
    zip.close();
  }
}

async function verifyOpened(zip: ZipFile, options: ReadingOptions): Promise<ArchiveReport> {
  const entries: Entry[] = [];
  for await (const entry of zip.eachEntry()) entries.push(entry);
  const problems: string[] = [];
  for (const entry of entries) problems.push(...(await entryProblems(zip, entry)));
  const bases = new Set(entries.map((entry) => entry.fileName.split('/')[0] ?? ''));
  const [baseDirectory = ''] = bases;
  if (bases.size !== 1 || entries.some((entry) => !entry.fileName.includes('/'))) {
    return {
      problems: [...problems, 'The archive does not hold exactly one folder.'],
      baseDirectory: '',
      files: [],
    };
  }
  const source = archiveBag({ zip, entries, baseDirectory, onProblem: (problem) => problems.push(problem) });
  const bag = await verifyBag(source, options);
  return { problems: [...problems, ...bag.problems], baseDirectory, files: bag.files };
}

/** Where the two headers of an entry disagree, programs unpack different files from one archive. */
async function entryProblems(zip: ZipFile, entry: Entry): Promise<string[]> {
  const header = await zip.readLocalFileHeaderPromise(entry);
  const name = JSON.stringify(entry.fileName);
  return [
    ...(header.fileName.equals(entry.fileNameRaw)
      ? []
      : [`The two headers of ${name} name different files.`]),
    ...(entry.compressionMethod === stored ? [] : [`${name} is compressed.`]),
    ...(entry.isEncrypted() ? [`${name} is encrypted.`] : []),
    ...(isPlainFile(entry) ? [] : [`${name} is not a plain file.`]),
  ];
}

/** Unix file type in the upper half of the attributes: 0o100000 is a regular file, 0 is not told. */
function isPlainFile(entry: Entry): boolean {
  const type = (entry.externalFileAttributes >>> 16) & 0o170000;
  return !entry.fileName.endsWith('/') && (type === 0o100000 || type === 0);
}

interface OpenArchive {
  zip: ZipFile;
  entries: Entry[];
  baseDirectory: string;
  onProblem: (problem: string) => void;
}

function archiveBag({ zip, entries, baseDirectory, onProblem }: OpenArchive): BagSource {
  const relative = (entry: Entry) => entry.fileName.slice(baseDirectory.length + 1);
  const byPath = new Map(entries.map((entry) => [relative(entry), entry]));
  return {
    paths: entries.map(relative),
    open: async (path) => {
      const entry = byPath.get(path);
      if (!entry) throw new Error(`There is no entry ${path}`);
      return withCrc(await zip.openReadStreamPromise(entry), (crc) => {
        if (crc !== entry.crc32) onProblem(`The CRC-32 of ${path} does not agree with its bytes.`);
      });
    },
  };
}

async function* withCrc(bytes: Bytes, onEnd: (crc: number) => void): AsyncGenerator<Buffer> {
  let crc = 0;
  for await (const chunk of bytes) {
    crc = crc32(chunk, crc);
    yield chunk;
  }
  onEnd(crc);
}

function messageOf(error: unknown): string {
  return (error instanceof Error ? error.message : String(error)).replace(/\.$/, '');
}
