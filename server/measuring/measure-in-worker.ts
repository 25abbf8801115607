import { MessageChannel, type Transferable } from 'node:worker_threads';
import type { MeasureControls, MeasureInput, MeasureResult } from './measure-file.ts';
import type { MeasureTask } from './measure.worker.ts';

/** What this needs of a pool of threads. */
export interface MeasurePool {
  run(
    task: MeasureTask,
    options?: { signal?: AbortSignal; transferList?: Transferable[] },
  ): Promise<MeasureResult>;
}

/** Address of the worker without its ending, for the pool. */
export const measureWorkerModule = new URL('./measure.worker', import.meta.url);

/** Runs `measureFile` in a thread of `pool`. An aborted `signal` ends the thread; what it wrote stays in `viewsDir`. */
export async function measureInWorker(
  pool: MeasurePool,
  input: MeasureInput,
  { onProgress, signal }: MeasureControls = {},
): Promise<MeasureResult> {
  const { port1, port2 } = new MessageChannel();
  if (onProgress) port1.on('message', onProgress);
  try {
    return await pool.run(
      { ...input, port: port2 },
      { transferList: [port2], ...(signal ? { signal } : {}) },
    );
  } finally {
    port1.close();
  }
}
