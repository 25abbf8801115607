import type { DeclaredLayout } from '@shared/contract/layouts.ts';
import type { Declaration } from '@shared/contract/uploads.ts';
import type { FileReading, Undeclared } from '@/composables/uploads/read-recording-file.ts';

/**
 * `reading` its header; `undeclared`, since it does not say how its samples lie; `refused` for what it is; `ready` to be sent; `waiting` in line; `sending`; `paused` by the
 * person; `lost` the connection; `checking` on the server; `measuring`; `measured`; `failed`; `cancelled`; `missing`
 * its file, which was chosen before a reload and has to be chosen again.
 */
export type UploadStage =
  | 'reading'
  | 'undeclared'
  | 'refused'
  | 'ready'
  | 'waiting'
  | 'sending'
  | 'paused'
  | 'lost'
  | 'checking'
  | 'measuring'
  | 'measured'
  | 'failed'
  | 'cancelled'
  | 'missing';

/** What is declared of all files that are sent together. */
export type UploadTarget = Omit<Declaration, 'layout' | 'camera'> & { runId: string };

export interface UploadItem {
  key: string;
  fileName: string;
  sizeBytes: number;
  stage: UploadStage;
  reading: FileReading | null;
  /** 0 to 1 while the sound of a film is taken out. */
  readShare: number;
  /** Told once for all files that are sent together. */
  target: UploadTarget | null;
  /** Of a file that does not say itself how its samples lie. */
  layout: DeclaredLayout | null;
  /** What it could be, as long as its layout is not declared. */
  undeclared: Undeclared | null;
  runTitle: string;
  uploadId: string | null;
  sentBytes: number;
  bytesPerSecond: number | null;
  recordingId: string | null;
  /** 0 to 1 while measuring. */
  measuredShare: number;
  /** Why it was refused, lost or failed. */
  message: string;
  /** A lost connection is tried again by itself; what a person has to mend is not. */
  retriesItself: boolean;
}

export function newUploadItem(key: string, facts: Pick<UploadItem, 'fileName' | 'sizeBytes'>): UploadItem {
  return {
    ...facts,
    key,
    stage: 'reading',
    reading: null,
    readShare: 0,
    target: null,
    layout: null,
    undeclared: null,
    runTitle: '',
    uploadId: null,
    sentBytes: 0,
    bytesPerSecond: null,
    recordingId: null,
    measuredShare: 0,
    message: '',
    retriesItself: false,
  };
}

const inHandStages: ReadonlySet<UploadStage> = new Set(['waiting', 'sending', 'paused', 'lost', 'checking']);

/** Leaving the page now would interrupt it. */
export function isInHand(item: Pick<UploadItem, 'stage'>): boolean {
  return inHandStages.has(item.stage);
}

const doneStages: ReadonlySet<UploadStage> = new Set([
  'measuring',
  'measured',
  'failed',
  'cancelled',
  'refused',
]);

/** Nothing more of it will travel. */
export function isDone(item: Pick<UploadItem, 'stage'>): boolean {
  return doneStages.has(item.stage);
}

/** The same file, or the film it was taken out of, as far as can be told without reading all of it: by name and size. */
export function isSameFile(
  item: Pick<UploadItem, 'fileName' | 'sizeBytes' | 'reading'>,
  file: Pick<File, 'name' | 'size'>,
): boolean {
  const chosen = item.reading?.camera ?? item;
  return chosen.fileName === file.name && chosen.sizeBytes === file.size;
}
