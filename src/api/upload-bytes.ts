import { DetailedError, Upload } from 'tus-js-client';

const bytesPath = '/api/uploads/bytes';
const chunkBytes = 8 * 2 ** 20;
/** A connection that comes back within half a minute is not worth a word. */
const retryDelaysMs = [0, 1000, 3000, 5000, 8000, 13_000];

export interface ByteTransfer {
  /** Starts, or goes on from what the server holds. */
  start(): void;
  /** Keeps what has arrived. */
  pause(): Promise<void>;
}

export interface ByteTransferOptions {
  uploadId: string;
  file: Blob;
  /** The server may hold bytes of it from an earlier try. */
  isResumed: boolean;
  onProgress: (sentBytes: number) => void;
  onDone: () => void;
  /** `status` is 0 where no answer came at all. */
  onFailed: (failure: { status: number; detail: string }) => void;
}

function statusOf(error: Error | DetailedError): number {
  return error instanceof DetailedError ? (error.originalResponse?.getStatus() ?? 0) : 0;
}

function detailOf(error: Error | DetailedError): string {
  const body = error instanceof DetailedError ? (error.originalResponse?.getBody() ?? '') : '';
  try {
    const problem: unknown = JSON.parse(body);
    const detail = typeof problem === 'object' && problem !== null && 'detail' in problem && problem.detail;
    return typeof detail === 'string' ? detail : '';
  } catch {
    return '';
  }
}

/** Sends the bytes of an announced upload by tus. Its stream bears the id of the upload, so no address is kept here. */
export function transferBytes(options: ByteTransferOptions): ByteTransfer {
  const { uploadId, file, isResumed, onProgress, onDone, onFailed } = options;
  const upload = new Upload(file, {
    endpoint: bytesPath,
    uploadUrl: isResumed ? `${bytesPath}/${uploadId}` : null,
    metadata: { uploadId },
    chunkSize: chunkBytes,
    retryDelays: retryDelaysMs,
    storeFingerprintForResuming: false,
    onProgress,
    onSuccess: onDone,
    onError: (error) => onFailed({ status: statusOf(error), detail: detailOf(error) }),
  });
  return { start: () => upload.start(), pause: () => upload.abort() };
}
