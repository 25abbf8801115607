import { randomUUID } from 'node:crypto';
import { readdir, rm } from 'node:fs/promises';
import { join } from 'node:path';
import { releaseSnapshotSchema, type ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import { moveDurably, syncFile, writeDurably } from '../store/durable-file.ts';
import type { DigestedFile } from './bag-files.ts';

import { verifyArchive } from './verify-archive.ts';
import { planBag, writeBag, type BagPlan, type OpenAudio } from './write-bag.ts';
import { openZipWriter } from './zip-writer.ts';

export interface BuildProgress {
  stage: 'writing' | 'verifying';
  /** Over both stages, from 0 to 1. */
  fraction: number;
}

export interface BuildInput {
  snapshot: ReleaseSnapshot;
  /** Path of the stored bytes with this sha256. */
  openAudio: OpenAudio;
  /** An existing folder; the archive and its `.sha256` appear in it when they are whole and verified. */
  outDir: string;
  signal?: AbortSignal;
  onProgress?: (progress: BuildProgress) => void;
}

export interface BuiltArchive {
  path: string;
  fileName: string;
  sizeBytes: number;
  sha256: string;
  /** Relative to the one folder in the archive, in byte order. */
  files: { path: string; sizeBytes: number; sha256: string }[];
}

/**
 * Builds the archive of a release from its snapshot and the audio bytes alone: the same snapshot gives the same bytes on
 * any day, in any time zone and locale. Nothing appears in `outDir` before an independent reader has found every
 * entry as the manifests say; a failure leaves no file.
 */
export async function buildArchive(input: BuildInput): Promise<BuiltArchive> {
  const snapshot = releaseSnapshotSchema.parse(input.snapshot);
  const plan = planBag(snapshot, input.openAudio);
  const fileName = `${plan.baseName}.zip`;
  const path = join(input.outDir, fileName);
  const partPath = `${path}.${randomUUID()}.part`;
  await removeStaleParts(input.outDir, fileName);
  try {
    const written = await writePart({ plan, partPath, date: entryDate(snapshot), input });
    await syncFile(partPath);
    await verifyPart({ plan, partPath, files: written.files, input });
    await moveDurably(partPath, path);
    await writeChecksum(path, fileName, written.sha256);
    const files = written.files.map(({ path: filePath, sizeBytes, sha256 }) => ({
      path: filePath,
      sizeBytes,
      sha256,
    }));
    return { path, fileName, sizeBytes: written.sizeBytes, sha256: written.sha256, files };
  } catch (error) {
    await rm(partPath, { force: true });
    throw error;
  }
}

/** DOS times in the archive hold no zone; they are written as UTC. */
function entryDate(snapshot: ReleaseSnapshot): Date {
  return new Date(`${snapshot.releaseDate}T00:00:00Z`);
}

async function writeChecksum(path: string, fileName: string, sha256: string): Promise<void> {
  try {
    await writeDurably(`${path}.sha256`, `${sha256}  ${fileName}\n`);
  } catch (error) {
    await rm(path, { force: true });
    throw error;
  }
}

/** What a crash left behind of earlier attempts at the same file. */
async function removeStaleParts(directory: string, fileName: string): Promise<void> {
  const names = await readdir(directory);
  const stale = names.filter((name) => name.startsWith(`${fileName}.`) && name.endsWith('.part'));
  await Promise.all(stale.map((name) => rm(join(directory, name), { force: true })));
}

interface WriteInput {
  plan: BagPlan;
  partPath: string;
  date: Date;
  input: BuildInput;
}

async function writePart({ plan, partPath, date, input }: WriteInput) {
  const zip = openZipWriter({ path: partPath, date, signal: input.signal });
  try {
    const files = await writeBag(plan, zip, progressOf('writing', plan, input));
    return { files, ...(await zip.finish()) };
  } catch (error) {
    await zip.abandon();
    throw error;
  }
}

interface VerifyInput {
  plan: BagPlan;
  partPath: string;
  files: DigestedFile[];
  input: BuildInput;
}

async function verifyPart({ plan, partPath, files, input }: VerifyInput): Promise<void> {
  const onBytes = progressOf('verifying', plan, input);
  const report = await verifyArchive(partPath, { signal: input.signal, onBytes });
  const problems = [...report.problems];
  if (report.baseDirectory !== plan.baseName) problems.push('The folder in the archive has another name.');
  if (listing(report.files) !== listing(files)) problems.push('The archive does not hold what was written.');
  if (problems.length > 0) throw new Error(`The archive was built but did not verify. ${problems.join(' ')}`);
}

function listing(files: DigestedFile[]): string {
  return files.map((file) => `${file.sha512} ${file.sizeBytes} ${file.path}`).join('\n');
}

function progressOf(
  stage: BuildProgress['stage'],
  plan: BagPlan,
  input: BuildInput,
): (sizeBytes: number) => void {
  const offset = stage === 'writing' ? 0 : 0.5;
  let done = 0;
  return (sizeBytes) => {
    done += sizeBytes;
    input.onProgress?.({ stage, fraction: offset + 0.5 * Math.min(1, done / plan.payloadBytes) });
  };
}
