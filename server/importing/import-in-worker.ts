import { MessageChannel, type Transferable } from 'node:worker_threads';
import { RefusedFileError } from '../../shared/audio/refused-file-error.ts';
import type { ImportControls } from './import-controls.ts';
import type { Imported, ImportInput } from './import-recording.ts';
import type { ImportOutcome, ImportTask } from './import.worker.ts';

/** What this needs of a pool of threads. */
export interface ImportPool {
  run(
    task: ImportTask,
    options?: { signal?: AbortSignal; transferList?: Transferable[] },
  ): Promise<ImportOutcome>;
}

/** Address of the worker without its ending, for the pool. */
export const importWorkerModule = new URL('./import.worker', import.meta.url);

/** Runs `importRecording` in a thread of `pool`. An aborted `signal` ends the thread and may leave a part of the file. */
export async function importInWorker(
  pool: ImportPool,
  input: ImportInput,
  { onProgress, signal }: ImportControls = {},
): Promise<Imported> {
  const { port1, port2 } = new MessageChannel();
  if (onProgress) port1.on('message', onProgress);
  try {
    const task = { ...input, port: port2 };
    const outcome = await pool.run(task, { transferList: [port2], ...(signal ? { signal } : {}) });
    if ('refusal' in outcome) throw new RefusedFileError(outcome.refusal.code, outcome.refusal.message);
    return outcome;
  } finally {
    port1.close();
  }
}
