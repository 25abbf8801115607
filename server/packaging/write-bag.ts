import { licenceMixRefusal } from '../../shared/domain/licence-mix.ts';
import type { ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import { bagAlgorithms, bagDeclaration, bagInfo, manifestText, type DigestedFile } from './bag-files.ts';
import { compareBytes } from './byte-order.ts';
import { bufferChunks, readChunks, withDigest, type Bytes } from './digests.ts';
import { nameProblems } from './names.ts';
import { archiveBaseName, releaseDocuments } from './release-documents.ts';
import { audioPath } from './tables/audio-path.ts';
import type { ZipWriter } from './zip-writer.ts';

export type OpenAudio = (sha256: string) => string | Promise<string>;

interface BagEntry {
  path: string;
  sizeBytes: number;
  /** Given where the content must be exactly this. */
  sha256?: string;
  open: () => Promise<Bytes>;
}

export interface BagPlan {
  baseName: string;
  /** All but the manifests, in byte order of their paths. */
  entries: BagEntry[];
  payloadBytes: number;
}

/** What the archive will hold, before a byte is written. Refuses names and licences that may not go out. */
export function planBag(snapshot: ReleaseSnapshot, openAudio: OpenAudio): BagPlan {
  const refusal = licenceMixRefusal(
    snapshot.recordings.map((recording) => recording.licence),
    snapshot.licence,
  );
  if (refusal !== null) throw new Error(refusal);
  const audio = snapshot.recordings.map((recording): BagEntry => ({
    path: `data/${audioPath(recording)}`,
    sizeBytes: recording.sizeBytes,
    sha256: recording.sha256,
    open: async () => readChunks(await openAudio(recording.sha256)),
  }));
  const documents = releaseDocuments(snapshot).map(({ path, content }) => documentEntry(path, content));
  const payload = [...documents, ...audio].sort((a, b) => compareBytes(a.path, b.path));
  const info = documentEntry('bag-info.txt', Buffer.from(bagInfo(snapshot, payload), 'utf8'));
  const declaration = documentEntry('bagit.txt', Buffer.from(bagDeclaration, 'utf8'));
  const plan = {
    baseName: archiveBaseName(snapshot),
    entries: [info, declaration, ...payload],
    payloadBytes: payload.reduce((sum, entry) => sum + entry.sizeBytes, 0),
  };
  const problems = nameProblems(plan.entries.map((entry) => `${plan.baseName}/${entry.path}`));
  if (problems.length > 0) throw new Error(`The archive cannot be named safely. ${problems.join(' ')}`);
  return plan;
}

function documentEntry(path: string, content: Buffer): BagEntry {
  return { path, sizeBytes: content.length, open: async () => bufferChunks(content) };
}

/**
 * Writes the planned entries, then the manifests and the tag manifests over what was truly written. In byte order the
 * manifests come last, so that every file is read once only.
 */
export async function writeBag(
  plan: BagPlan,
  zip: ZipWriter,
  onBytes: (sizeBytes: number) => void,
): Promise<DigestedFile[]> {
  const write = (entry: BagEntry) => writeEntry({ zip, baseName: plan.baseName, entry, onBytes });
  const files: DigestedFile[] = [];
  for (const entry of plan.entries) files.push(await write(entry));
  const payload = files.filter((file) => file.path.startsWith('data/'));
  for (const algorithm of bagAlgorithms) {
    const text = manifestText(payload, algorithm);
    files.push(await write(documentEntry(`manifest-${algorithm}.txt`, Buffer.from(text, 'utf8'))));
  }
  const tagFiles = files.filter((file) => !file.path.startsWith('data/'));
  for (const algorithm of bagAlgorithms) {
    const text = manifestText(tagFiles, algorithm);
    files.push(await write(documentEntry(`tagmanifest-${algorithm}.txt`, Buffer.from(text, 'utf8'))));
  }
  return files;
}

interface WriteEntryInput {
  zip: ZipWriter;
  baseName: string;
  entry: BagEntry;
  onBytes: (sizeBytes: number) => void;
}

async function writeEntry({ zip, baseName, entry, onBytes }: WriteEntryInput): Promise<DigestedFile> {
  const written: DigestedFile = { path: entry.path, sizeBytes: -1, sha256: '', sha512: '' };
  const digested = withDigest(await entry.open(), (digest) => Object.assign(written, digest));
  await zip.add(`${baseName}/${entry.path}`, counted(checked(digested, entry, written), onBytes));
  return written;
}

/** Fails the stream, and with it the archive, where the bytes are not those the snapshot names. */
async function* checked(bytes: Bytes, entry: BagEntry, written: DigestedFile): AsyncGenerator<Buffer> {
  yield* bytes;
  if (written.sizeBytes !== entry.sizeBytes)
    throw new Error(`${entry.path} has ${written.sizeBytes} bytes instead of ${entry.sizeBytes}.`);
  if (entry.sha256 !== undefined && written.sha256 !== entry.sha256)
    throw new Error(`The bytes of ${entry.path} are not those the snapshot names.`);
}

async function* counted(bytes: Bytes, onBytes: (sizeBytes: number) => void): AsyncGenerator<Buffer> {
  for await (const chunk of bytes) {
    onBytes(chunk.length);
    yield chunk;
  }
}
