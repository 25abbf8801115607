import { reactive } from 'vue';
import type { Activity } from '@shared/contract/activity.ts';
import type { Recording } from '@shared/contract/recordings.ts';
import type { DeclaredLayout } from '@shared/contract/layouts.ts';
import type { CreateUpload, Upload } from '@shared/contract/uploads.ts';
import type { ByteTransfer, ByteTransferOptions } from '@/api/upload-bytes.ts';
import type { Hashing } from '@/composables/uploads/hash-file.ts';
import type { FileReading, ReadOutcome } from '@/composables/uploads/read-recording-file.ts';
import type { ReadWatch } from '@/composables/uploads/read-watch.ts';
import { createTransferRate } from '@/composables/uploads/transfer-rate.ts';
import { failureOf, failureOfError } from '@/composables/uploads/upload-failure.ts';
import { isSameFile, newUploadItem } from '@/composables/uploads/upload-item.ts';
import type { UploadItem, UploadTarget } from '@/composables/uploads/upload-item.ts';

/** What the queue needs of the browser and the server. */
export interface UploadGateway {
  read: (file: File, layout?: DeclaredLayout | null, watch?: ReadWatch) => Promise<ReadOutcome>;
  hash: (file: File) => Hashing;
  create: (input: CreateUpload) => Promise<string>;
  transfer: (options: ByteTransferOptions) => ByteTransfer;
  complete: (uploadId: string, sha256: string | undefined) => Promise<Pick<Recording, 'id' | 'processing'>>;
  cancel: (uploadId: string) => Promise<void>;
  nowMs: () => number;
}

type ReadFile = Extract<ReadOutcome, { reading: FileReading }>;

interface Work {
  file: File;
  hashing?: Hashing;
  /** Gives up reading it. */
  reading?: AbortController;
  transfer?: ByteTransfer;
}

const mostAtOnce = 2;

/** Files on their way to the server, two at a time; one upload never waits for a person to press something twice. */
export function createUploadQueue(gateway: UploadGateway) {
  const items = reactive<UploadItem[]>([]);
  const works = new Map<string, Work>();
  let made = 0;

  function find(key: string): UploadItem | undefined {
    return items.find((item) => item.key === key);
  }

  function add(fileName: string, sizeBytes: number): UploadItem {
    made += 1;
    items.push(newUploadItem(String(made), { fileName, sizeBytes }));
    return items[items.length - 1] as UploadItem;
  }

  /** Takes chosen files: one that was interrupted goes on, one that is in the list already is passed over. */
  async function choose(files: readonly File[]): Promise<void> {
    await Promise.all(files.map(chooseOne));
  }

  async function chooseOne(file: File): Promise<void> {
    const same = items.find((item) => isSameFile(item, file) && item.stage !== 'cancelled');
    if (same?.stage === 'missing') await goOnWith(same, file);
    else if (!same) await readNew(file);
  }

  async function readNew(file: File): Promise<void> {
    const item = add(file.name, file.size);
    const reading = new AbortController();
    works.set(item.key, { file, reading });
    const onShare = (share: number) => void (item.readShare = share);
    const outcome = await gateway.read(file, null, { signal: reading.signal, onShare });
    if (item.stage !== 'reading' || reading.signal.aborted) return;
    if ('reading' in outcome) return makeReady(item, outcome);
    const { refusal: message, undeclared } = outcome;
    Object.assign(item, { stage: undeclared ? 'undeclared' : 'refused', message, undeclared });
  }

  /** What was taken out of a film goes in its place, and goes on where it was interrupted. */
  function makeReady(item: UploadItem, { reading, takenOut }: ReadFile): void {
    if (takenOut === undefined) return void Object.assign(item, { stage: 'ready', reading });
    const { name: fileName, size: sizeBytes } = takenOut;
    const missing = items.find((other) => other.stage === 'missing' && isSameFile(other, takenOut));
    if (missing) remove(item.key);
    works.set((missing ?? item).key, { file: takenOut });
    if (!missing) return void Object.assign(item, { stage: 'ready', reading, fileName, sizeBytes });
    Object.assign(missing, { stage: 'waiting', reading });
    pump();
  }

  /** Reads a file by the layout that was declared of it; where the two do not fit, it stays undeclared and says why. */
  async function declare(key: string, layout: DeclaredLayout): Promise<void> {
    const item = find(key);
    const work = works.get(key);
    if (item?.stage !== 'undeclared' || !work) return;
    const outcome = await gateway.read(work.file, layout);
    if (item.stage !== 'undeclared') return;
    if ('refusal' in outcome) item.message = outcome.refusal;
    else Object.assign(item, { stage: 'ready', reading: outcome.reading, layout, message: '' });
  }

  async function goOnWith(item: UploadItem, file: File): Promise<void> {
    works.set(item.key, { file });
    item.stage = 'waiting';
    pump();
    const outcome = await gateway.read(file);
    if ('reading' in outcome) item.reading = outcome.reading;
  }

  /** Lists what the server still has open from before; what arrived whole needs no file any more. */
  function adopt(uploads: readonly Upload[]): void {
    for (const upload of uploads) {
      if (items.some((item) => item.uploadId === upload.id)) continue;
      const item = add(upload.fileName, upload.sizeBytes);
      const { id: uploadId, receivedBytes: sentBytes, runTitle } = upload;
      Object.assign(item, { stage: 'missing', uploadId, sentBytes, runTitle });
      if (sentBytes === upload.sizeBytes) void finish(item);
    }
  }

  function send(target: UploadTarget, runTitle: string): void {
    for (const item of items) {
      if (item.stage === 'ready') Object.assign(item, { stage: 'waiting', target, runTitle });
    }
    pump();
  }

  function pump(): void {
    const running = items.filter((item) => item.stage === 'sending').length;
    const next = items.filter((item) => item.stage === 'waiting').slice(0, Math.max(0, mostAtOnce - running));
    for (const item of next) void begin(item);
  }

  async function begin(item: UploadItem): Promise<void> {
    const work = works.get(item.key);
    if (!work) return;
    Object.assign(item, { stage: 'sending', message: '', bytesPerSecond: null });
    const isResumed = item.uploadId !== null;
    try {
      item.uploadId ??= await announce(item);
    } catch (error) {
      return fail(item, failureOfError(error));
    }
    // Paused or cancelled while it was announced.
    if (item.stage !== 'sending') return;
    work.hashing ??= gateway.hash(work.file);
    work.transfer ??= transferOf(item, work, isResumed);
    work.transfer.start();
  }

  async function announce({ fileName, sizeBytes, target, layout, reading }: UploadItem): Promise<string> {
    if (!target) throw new Error('An upload needs its declaration.');
    return gateway.create({ ...target, fileName, sizeBytes, layout, camera: reading?.camera ?? null });
  }

  function transferOf(item: UploadItem, work: Work, isResumed: boolean): ByteTransfer {
    const rate = createTransferRate();
    return gateway.transfer({
      uploadId: item.uploadId ?? '',
      file: work.file,
      isResumed,
      onProgress: (sentBytes) => {
        item.sentBytes = sentBytes;
        item.bytesPerSecond = rate.add(sentBytes, gateway.nowMs());
      },
      onDone: () => void finish(item),
      onFailed: ({ status, detail }) => fail(item, failureOf(status, detail)),
    });
  }

  async function finish(item: UploadItem): Promise<void> {
    Object.assign(item, { stage: 'checking', sentBytes: item.sizeBytes, message: '' });
    pump();
    try {
      const sha256 = await works.get(item.key)?.hashing?.sha256;
      const recording = await gateway.complete(item.uploadId ?? '', sha256);
      const stage = recording.processing === 'measured' ? 'measured' : 'measuring';
      Object.assign(item, { stage, recordingId: recording.id });
      works.delete(item.key);
    } catch (error) {
      fail(item, failureOfError(error));
    }
  }

  function fail(item: UploadItem, failure: ReturnType<typeof failureOf>): void {
    if (item.stage === 'paused' || item.stage === 'cancelled') return;
    Object.assign(item, failure, { bytesPerSecond: null });
    pump();
  }

  async function pause(key: string): Promise<void> {
    const item = find(key);
    if (!item || (item.stage !== 'sending' && item.stage !== 'waiting')) return;
    Object.assign(item, { stage: 'paused', bytesPerSecond: null });
    await works.get(key)?.transfer?.pause();
    pump();
  }

  function resume(key: string): void {
    const item = find(key);
    if (!item || (item.stage !== 'paused' && item.stage !== 'lost')) return;
    if (item.uploadId !== null && item.sentBytes === item.sizeBytes) return void finish(item);
    item.stage = 'waiting';
    pump();
  }

  /** Tries again what was lost by no fault that a person has to mend. */
  function resumeLost(isAsked = false): void {
    for (const item of items) {
      if (item.stage === 'lost' && (item.retriesItself || isAsked)) resume(item.key);
    }
  }

  async function cancel(key: string): Promise<void> {
    const item = find(key);
    if (!item) return;
    const work = works.get(key);
    item.stage = 'cancelled';
    works.delete(key);
    work?.hashing?.stop();
    await work?.transfer?.pause();
    try {
      if (item.uploadId !== null) await gateway.cancel(item.uploadId);
    } catch (error) {
      item.message = failureOfError(error).message;
    }
    pump();
  }

  function remove(key: string): void {
    works.get(key)?.hashing?.stop();
    works.get(key)?.reading?.abort();
    works.delete(key);
    const place = items.findIndex((item) => item.key === key);
    if (place >= 0) items.splice(place, 1);
  }

  function hear(activity: Activity): void {
    if (activity.topic !== 'recording') return;
    const item = items.find(({ recordingId }) => recordingId === activity.id);
    if (!item) return;
    item.measuredShare = activity.progress;
    if (activity.processing === 'measured') item.stage = 'measured';
    if (activity.processing === 'failed')
      Object.assign(item, { stage: 'failed', message: 'The measurement failed; the file itself is stored.' });
  }

  /** The page is left: nothing goes on without it. */
  async function stop(): Promise<void> {
    await Promise.all(items.map((item) => pause(item.key)));
    for (const { hashing, reading } of works.values()) {
      hashing?.stop();
      reading?.abort();
    }
  }

  return { items, choose, declare, adopt, send, pause, resume, resumeLost, cancel, remove, hear, stop };
}

export type UploadQueue = ReturnType<typeof createUploadQueue>;
