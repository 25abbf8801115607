import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';
import type { BlobStore } from '../../store/blob-store.ts';
import { withFileSource } from '../../store/file-source.ts';
import type { RecordingRow } from './recordings.queries.ts';

export interface StoredAudio {
  filePath: string;
  header: WavHeader;
}

const mostKept = 200;

export type StoredAudioReader = ReturnType<typeof createStoredAudioReader>;

/** Where the samples of a recording lie. Stored bytes never change, so a header is read once. */
export function createStoredAudioReader(store: BlobStore) {
  const headers = new Map<string, Promise<WavHeader>>();

  function readHeader(filePath: string, sha256: string): Promise<WavHeader> {
    const known = headers.get(sha256);
    if (known !== undefined) return known;
    const [oldest] = headers.keys();
    if (headers.size >= mostKept && oldest !== undefined) headers.delete(oldest);
    const reading = withFileSource(filePath, readWavHeader).then((header) => ({ ...header, metadata: [] }));
    headers.set(sha256, reading);
    reading.catch(() => headers.delete(sha256));
    return reading;
  }

  return async ({ sha256 }: Pick<RecordingRow, 'sha256'>): Promise<StoredAudio> => {
    const filePath = store.pathOf(sha256);
    return { filePath, header: await readHeader(filePath, sha256) };
  };
}
