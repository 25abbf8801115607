import { mkdir, readFile } from 'node:fs/promises';
import type { MessagePort } from 'node:worker_threads';
import type { ReleaseSnapshot } from '../../shared/contract/release-snapshot.ts';
import { buildArchive, type BuiltArchive } from './build-archive.ts';

export interface ArchiveTask {
  /** The frozen snapshot as it is stored. */
  snapshotPath: string;
  /** Path of the stored bytes by their sha256. */
  audioPaths: Readonly<Record<string, string>>;
  outDir: string;
  /** Gets a number from 0 to 1 now and then. */
  port: MessagePort;
}

const LEAST_INTERVAL_MS = 200;

/** Builds and verifies one archive in a thread of its own, so that the server goes on answering. */
export default async function archiveTask(task: ArchiveTask): Promise<BuiltArchive> {
  const { snapshotPath, audioPaths, outDir, port } = task;
  let lastAtMs = 0;
  try {
    await mkdir(outDir, { recursive: true, mode: 0o700 });
    return await buildArchive({
      snapshot: JSON.parse(await readFile(snapshotPath, 'utf8')) as ReleaseSnapshot,
      openAudio: (sha256) => audioPaths[sha256] ?? missing(sha256),
      outDir,
      onProgress: ({ fraction }) => {
        const nowMs = performance.now();
        if (nowMs - lastAtMs < LEAST_INTERVAL_MS) return;
        lastAtMs = nowMs;
        port.postMessage(fraction);
      },
    });
  } finally {
    port.close();
  }
}

function missing(sha256: string): never {
  throw new Error(`The snapshot names bytes that were not handed over: ${sha256}.`);
}
