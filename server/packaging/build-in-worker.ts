import { MessageChannel, type Transferable } from 'node:worker_threads';
import type { ArchiveTask } from './archive.worker.ts';
import type { BuiltArchive } from './build-archive.ts';

/** What this needs of a pool of threads. */
export interface ArchivePool {
  run(
    task: ArchiveTask,
    options?: { signal?: AbortSignal; transferList?: Transferable[] },
  ): Promise<BuiltArchive>;
}

/** Address of the worker without its ending, for the pool. */
export const archiveWorkerModule = new URL('./archive.worker', import.meta.url);

interface BuildControls {
  onProgress: (fraction: number) => void;
  signal: AbortSignal;
}

/** Runs `buildArchive` in a thread of `pool`. What an aborted build leaves is removed by the next one. */
export async function buildInWorker(
  pool: ArchivePool,
  task: Omit<ArchiveTask, 'port'>,
  { onProgress, signal }: BuildControls,
): Promise<BuiltArchive> {
  const { port1, port2 } = new MessageChannel();
  port1.on('message', onProgress);
  try {
    return await pool.run({ ...task, port: port2 }, { transferList: [port2], signal });
  } finally {
    port1.close();
  }
}
