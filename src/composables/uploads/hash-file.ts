import type { HashAnswer } from '@/composables/uploads/hash-messages.ts';

export interface Hashing {
  /** Undefined where it could not be computed; the server's own sum then stands alone. */
  sha256: Promise<string | undefined>;
  stop: () => void;
}

/** Computes the SHA-256 of a file beside the page, piece by piece, while its bytes travel. */
export function hashFile(file: Blob): Hashing {
  const worker = new Worker(new URL('./hash.worker.ts', import.meta.url), { type: 'module' });
  const sha256 = new Promise<string | undefined>((resolve) => {
    worker.onmessage = ({ data }: MessageEvent<HashAnswer>) => {
      resolve('sha256' in data ? data.sha256 : undefined);
      worker.terminate();
    };
    worker.onerror = () => resolve(undefined);
    worker.postMessage(file);
  });
  return { sha256, stop: () => worker.terminate() };
}
