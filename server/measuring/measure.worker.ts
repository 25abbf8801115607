import type { MessagePort } from 'node:worker_threads';
import { measureFile, type MeasureInput, type MeasureResult } from './measure-file.ts';

export interface MeasureTask extends MeasureInput {
  /** Gets a number from 0 to 1 now and then. */
  port: MessagePort;
}

const LEAST_INTERVAL_MS = 100;

/** Measures one recording in a thread of its own, so that the server goes on answering. */
export default async function measureTask({ port, ...input }: MeasureTask): Promise<MeasureResult> {
  let lastAtMs = 0;
  const onProgress = (fraction: number) => {
    const nowMs = performance.now();
    if (fraction < 1 && nowMs - lastAtMs < LEAST_INTERVAL_MS) return;
    lastAtMs = nowMs;
    port.postMessage(fraction);
  };
  try {
    return await measureFile({ ...input, onProgress });
  } finally {
    port.close();
  }
}
