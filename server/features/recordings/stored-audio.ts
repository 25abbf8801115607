import { liesLikeWav } from '../../../shared/audio/raw-file.ts';
import { readWavHeader, type WavHeader } from '../../../shared/audio/wav-header.ts';
import type { ImportControls } from '../../importing/import-controls.ts';
import type { BlobStore } from '../../store/blob-store.ts';
import { withFileSource } from '../../store/file-source.ts';
import type { RecordingRow } from './recordings.queries.ts';
import type { WorkingCopies } from './working-copies.ts';

type AudioHeader = Pick<WavHeader, 'format' | 'dataOffset'>;

/** What is read for every figure and every view: `filePath` holds the samples as a WAV file does, wherever they came from. */
export interface StoredAudio {
  filePath: string;
  header: AudioHeader;
}

type Source = Pick<RecordingRow, 'id' | 'sha256' | 'format' | 'layout' | 'timeExpansion'>;

const mostKept = 200;

export type StoredAudioReader = ReturnType<typeof createStoredAudioReader>;

/**
 * Where the samples of a recording lie. WAV files, and samples that lie as in one, are read where they are stored; of anything else a
 * working copy is made when it is first asked for.
 */
export function createStoredAudioReader(store: BlobStore, workingCopies: WorkingCopies) {
  const headers = new Map<string, Promise<AudioHeader>>();

  /** Neither stored bytes nor working copies ever change, so a header is read once. */
  function readHeader(filePath: string): Promise<AudioHeader> {
    const known = headers.get(filePath);
    if (known !== undefined) return known;
    const [oldest] = headers.keys();
    if (headers.size >= mostKept && oldest !== undefined) headers.delete(oldest);
    const reading = withFileSource(filePath, readWavHeader).then(({ format, dataOffset }) => ({
      format,
      dataOffset,
    }));
    headers.set(filePath, reading);
    reading.catch(() => headers.delete(filePath));
    return reading;
  }

  /** `controls` are those of the making of a working copy. */
  return async (source: Source, controls: ImportControls = {}): Promise<StoredAudio> => {
    const storedPath = store.pathOf(source.sha256);
    if (isWav(source)) return { filePath: storedPath, header: await readHeader(storedPath) };
    if (source.layout?.kind === 'raw' && liesLikeWav(source.layout)) {
      return { filePath: storedPath, header: rawHeader(source, source.layout.headerBytes) };
    }
    const { filePath, format } = await workingCopies.ensure(source, storedPath, controls);
    return { filePath, header: { ...(await readHeader(filePath)), format } };
  };
}

function isWav({ format }: Source): boolean {
  return ['RIFF', 'RF64', 'BW64'].includes(format.container);
}

/** The row holds the true rate, a header that of the file. */
function rawHeader({ format, timeExpansion }: Source, dataOffset: number): AudioHeader {
  return { format: { ...format, sampleRateHz: Math.round(format.sampleRateHz / timeExpansion) }, dataOffset };
}
