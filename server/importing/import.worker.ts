import type { MessagePort } from 'node:worker_threads';
import { RefusedFileError } from '../../shared/audio/refused-file-error.ts';
import { importRecording, type Imported, type ImportInput } from './import-recording.ts';

export interface ImportTask extends ImportInput {
  /** Gets a number from 0 to 1 now and then. */
  port: MessagePort;
}

/** An error loses its class on its way between threads, and with it whether it is a sentence for people. */
export type ImportOutcome = Imported | { refusal: Pick<RefusedFileError, 'code' | 'message'> };

const LEAST_INTERVAL_MS = 100;

/** Imports one recording in a thread of its own, so that the server goes on answering. */
export default async function importTask({ port, ...input }: ImportTask): Promise<ImportOutcome> {
  let lastAtMs = 0;
  const onProgress = (fraction: number) => {
    const nowMs = performance.now();
    if (nowMs - lastAtMs < LEAST_INTERVAL_MS) return;
    lastAtMs = nowMs;
    port.postMessage(fraction);
  };
  try {
    return await importRecording(input, { onProgress });
  } catch (error) {
    if (!(error instanceof RefusedFileError)) throw error;
    return { refusal: { code: error.code, message: error.message } };
  } finally {
    port.close();
  }
}
