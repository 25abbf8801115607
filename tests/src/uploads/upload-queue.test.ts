import { flushPromises } from '@vue/test-utils';
import { beforeEach, describe, expect, it } from 'vitest';
import type { RawLayout } from '@shared/audio/declared-layout.ts';
import type { CameraOrigin } from '@shared/contract/camera.ts';
import type { DeclaredLayout } from '@shared/contract/layouts.ts';
import type { CreateUpload, Upload } from '@shared/contract/uploads.ts';
import type { ByteTransferOptions } from '@/api/upload-bytes.ts';
import { clientProblem, ProblemError } from '@/api/problem-error.ts';
import { createUploadQueue } from '@/composables/uploads/upload-queue.ts';
import type { ReadOutcome } from '@/composables/uploads/read-recording-file.ts';
import type { ReadWatch } from '@/composables/uploads/read-watch.ts';
import type { UploadGateway } from '@/composables/uploads/upload-queue.ts';
import { format } from '../recordings/recording-fixture.ts';

const target = {
  runId: 'run',
  setupId: 'set-up',
  sensitivity: [],
  licence: 'CC-BY-4.0' as const,
  runOffsetNs: null,
  timeExpansion: 1,
  note: '',
};

function wav(name: string, sizeBytes = 1000): File {
  return new File([new Uint8Array(sizeBytes)], name);
}

function refusal(status: number, detail: string): ProblemError {
  const code = 'file-refused';
  return new ProblemError({ type: '', title: '', status, detail, code, requestId: '', fields: [] });
}

const layout: RawLayout = {
  kind: 'raw',
  encoding: 'signed',
  bitsPerSample: 16,
  byteOrder: 'little',
  channels: 1,
  sampleRateHz: 500_000,
  headerBytes: 0,
};

const camera: CameraOrigin = {
  fileName: 'a.mov',
  sizeBytes: 1000,
  sha256: null,
  container: 'QuickTime',
  codec: 'aac',
  trackSampleRateHz: 48_000,
  soundTracks: 1,
  gaps: 0,
  soundStartS: 0,
};

function outcomeOf(name: string, declared: DeclaredLayout | undefined): ReadOutcome {
  if (name.endsWith('.mov'))
    return {
      reading: { format, findings: [], camera: { ...camera, fileName: name } },
      takenOut: wav('old.wav'),
    };
  if (name.endsWith('.mp3')) return { refusal: 'This is an MP3 file.', undeclared: null };
  if (declared?.kind === 'raw' && declared.channels === 3)
    return { refusal: 'It does not fit.', undeclared: null };
  return name.endsWith('.raw') && declared === undefined
    ? { refusal: 'Nothing says what it is.', undeclared: { kind: 'raw', firstLines: [] } }
    : { reading: { format, findings: [] } };
}

/** A server and a browser of the test's own, which do what they are told when they are told. */
function makeGateway() {
  const transfers: (ByteTransferOptions & { starts: number; pauses: number })[] = [];
  const completed: { uploadId: string; sha256: string | undefined }[] = [];
  const cancelled: string[] = [];
  const created: CreateUpload[] = [];
  const gateway: UploadGateway = {
    read: (file, layout) => Promise.resolve(outcomeOf(file.name, layout ?? undefined)),
    hash: () => ({ sha256: Promise.resolve('a'.repeat(64)), stop: () => undefined }),
    create: (input) => {
      created.push(input);
      return Promise.resolve(`upload-${input.fileName}`);
    },
    transfer: (options) => {
      const transfer = { ...options, starts: 0, pauses: 0 };
      transfers.push(transfer);
      return {
        start: () => void (transfer.starts += 1),
        pause: () => Promise.resolve(void (transfer.pauses += 1)),
      };
    },
    complete: (uploadId, sha256) => {
      completed.push({ uploadId, sha256 });
      return Promise.resolve({ id: `recording-${uploadId}`, processing: 'queued' });
    },
    cancel: (uploadId) => Promise.resolve(void cancelled.push(uploadId)),
    nowMs: () => 0,
  };
  return { gateway, transfers, completed, cancelled, created };
}

function openUpload(part: Partial<Upload> = {}): Upload {
  return {
    id: 'upload-old',
    runId: 'run',
    runTitle: 'Film 07',
    setupId: 'set-up',
    fileName: 'old.wav',
    sizeBytes: 1000,
    state: 'open',
    receivedBytes: 400,
    recordingId: null,
    createdAt: '2026-03-02T10:00:00.000Z',
    expiresAt: '2026-03-09T10:00:00.000Z',
    ...part,
  };
}

describe('the queue of uploads', () => {
  let test = makeGateway();
  let queue = createUploadQueue(test.gateway);

  beforeEach(() => {
    test = makeGateway();
    queue = createUploadQueue(test.gateway);
  });

  async function sendFiles(...names: string[]): Promise<void> {
    await queue.choose(names.map((name) => wav(name)));
    queue.send(target, 'Film 07');
    await flushPromises();
  }

  function stages(): string[] {
    return queue.items.map(({ stage }) => stage);
  }

  it('reads headers first and sends nothing by itself', async () => {
    await queue.choose([wav('a.wav'), wav('b.mp3')]);
    expect(stages()).toEqual(['ready', 'refused']);
    expect(queue.items[1]?.message).toBe('This is an MP3 file.');
    expect(test.transfers).toHaveLength(0);
  });

  it('never sends a refused file', async () => {
    await sendFiles('a.wav', 'b.mp3');
    expect(test.transfers.map(({ uploadId }) => uploadId)).toEqual(['upload-a.wav']);
  });

  it('asks how the samples of a file lie that does not say it, and sends what was declared', async () => {
    await queue.choose([wav('a.raw'), wav('b.wav')]);
    expect(stages()).toEqual(['undeclared', 'ready']);
    const key = queue.items[0]?.key ?? '';
    await queue.declare(key, { ...layout, channels: 3 });
    expect([stages()[0], queue.items[0]?.message]).toEqual(['undeclared', 'It does not fit.']);
    await queue.declare(key, layout);
    expect([stages()[0], queue.items[0]?.message]).toEqual(['ready', '']);
    queue.send(target, 'Film 07');
    await flushPromises();
    expect(test.created.map(({ fileName, layout: declared }) => [fileName, declared])).toEqual([
      ['a.raw', layout],
      ['b.wav', null],
    ]);
  });

  it('passes over a file that is in the list already', async () => {
    await queue.choose([wav('a.wav')]);
    await queue.choose([wav('a.wav')]);
    expect(queue.items).toHaveLength(1);
  });

  it('sends two at a time', async () => {
    await sendFiles('a.wav', 'b.wav', 'c.wav');
    expect(stages()).toEqual(['sending', 'sending', 'waiting']);
    test.transfers[0]?.onDone();
    await flushPromises();
    expect(stages()).toEqual(['measuring', 'sending', 'sending']);
  });

  it('sends the sum of the bytes along when they have arrived', async () => {
    await sendFiles('a.wav');
    test.transfers[0]?.onDone();
    await flushPromises();
    expect(test.completed).toEqual([{ uploadId: 'upload-a.wav', sha256: 'a'.repeat(64) }]);
    expect(queue.items[0]?.recordingId).toBe('recording-upload-a.wav');
  });

  it('follows the measurement', async () => {
    await sendFiles('a.wav');
    test.transfers[0]?.onDone();
    await flushPromises();
    const activity = {
      topic: 'recording' as const,
      id: 'recording-upload-a.wav',
      sharing: 'pending' as const,
    };
    queue.hear({ ...activity, processing: 'measuring', progress: 0.5 });
    expect(queue.items[0]).toMatchObject({ stage: 'measuring', measuredShare: 0.5 });
    queue.hear({ ...activity, processing: 'measured', progress: 1 });
    expect(stages()).toEqual(['measured']);
  });

  it('pauses, gives its place to the next, and goes on with the same upload', async () => {
    await sendFiles('a.wav', 'b.wav', 'c.wav');
    await queue.pause('1');
    expect(test.transfers[0]?.pauses).toBe(1);
    expect(stages()).toEqual(['paused', 'sending', 'sending']);
    test.transfers[1]?.onDone();
    await flushPromises();
    queue.resume('1');
    await flushPromises();
    expect(test.transfers[0]?.starts).toBe(2);
    expect(test.transfers.filter(({ uploadId }) => uploadId === 'upload-a.wav')).toHaveLength(1);
  });

  it('keeps what was lost and tries it again without being asked', async () => {
    await sendFiles('a.wav');
    test.transfers[0]?.onFailed({ status: 0, detail: '' });
    expect(stages()).toEqual(['lost']);
    queue.resumeLost();
    await flushPromises();
    expect(stages()).toEqual(['sending']);
    expect(test.transfers[0]?.starts).toBe(2);
  });

  it('waits for a new sign-in after the session has ended', async () => {
    await sendFiles('a.wav');
    test.transfers[0]?.onFailed({ status: 401, detail: '' });
    queue.resumeLost();
    expect(stages()).toEqual(['lost']);
    expect(queue.items[0]?.message).toContain('Sign in again');
    queue.resumeLost(true);
    await flushPromises();
    expect(stages()).toEqual(['sending']);
  });

  it('asks again for the recording when the answer to the last call was lost', async () => {
    await sendFiles('a.wav');
    const complete = test.gateway.complete;
    test.gateway.complete = () => Promise.reject(clientProblem('offline', 'No connection.'));
    test.transfers[0]?.onDone();
    await flushPromises();
    expect(stages()).toEqual(['lost']);
    test.gateway.complete = complete;
    queue.resumeLost();
    await flushPromises();
    expect(stages()).toEqual(['measuring']);
    expect(test.transfers[0]?.starts).toBe(1);
  });

  it('says in the words of the server why the whole file was refused', async () => {
    await sendFiles('a.wav');
    test.gateway.complete = () => Promise.reject(refusal(422, 'The bytes are not the ones announced.'));
    test.transfers[0]?.onDone();
    await flushPromises();
    expect(queue.items[0]).toMatchObject({
      stage: 'refused',
      message: 'The bytes are not the ones announced.',
    });
  });

  it('cancels on the server what was announced there', async () => {
    await sendFiles('a.wav');
    await queue.cancel('1');
    expect(test.cancelled).toEqual(['upload-a.wav']);
    expect(stages()).toEqual(['cancelled']);
    test.transfers[0]?.onFailed({ status: 0, detail: '' });
    expect(stages()).toEqual(['cancelled']);
  });

  it('lists what is open on the server and goes on when the same file is chosen again', async () => {
    queue.adopt([openUpload()]);
    expect(queue.items[0]).toMatchObject({ stage: 'missing', sentBytes: 400, runTitle: 'Film 07' });
    await queue.choose([wav('other.wav')]);
    await queue.choose([wav('old.wav')]);
    await flushPromises();
    expect(stages()).toEqual(['sending', 'ready']);
    expect(test.transfers).toHaveLength(1);
    expect(test.transfers[0]).toMatchObject({ uploadId: 'upload-old', isResumed: true });
  });

  it('sends the sound of a film in place of the film, and tells the film', async () => {
    await sendFiles('a.mov');
    expect(queue.items[0]).toMatchObject({ stage: 'sending', fileName: 'old.wav' });
    expect(test.created).toMatchObject([{ fileName: 'old.wav', sizeBytes: 1000, camera }]);
    expect((test.transfers[0]?.file as File).name).toBe('old.wav');
    await queue.choose([wav('a.mov')]);
    expect(queue.items).toHaveLength(1);
  });

  it('tells how much of the sound of a film is taken out, and gives up where it is removed from the list', async () => {
    const watches: ReadWatch[] = [];
    test.gateway.read = (_file, _layout, watch = {}) => {
      watches.push(watch);
      return new Promise((resolve) => {
        watch.signal?.addEventListener('abort', () => resolve(outcomeOf('a.mov', undefined)));
      });
    };
    const chosen = queue.choose([wav('a.mov')]);
    watches[0]?.onShare?.(0.25);
    expect(queue.items[0]).toMatchObject({ stage: 'reading', readShare: 0.25 });
    queue.remove(queue.items[0]?.key ?? '');
    await chosen;
    expect(watches[0]?.signal?.aborted).toBe(true);
    expect(queue.items).toHaveLength(0);
    queue.send(target, 'Film 07');
    await flushPromises();
    expect(test.transfers).toHaveLength(0);
  });

  it('goes on with the sound of a film when the film is chosen again', async () => {
    queue.adopt([openUpload()]);
    await queue.choose([wav('a.mov')]);
    await flushPromises();
    expect(stages()).toEqual(['sending']);
    expect(test.transfers[0]).toMatchObject({ uploadId: 'upload-old', isResumed: true });
  });

  it('takes a file of another size for another file', async () => {
    queue.adopt([openUpload()]);
    await queue.choose([wav('old.wav', 999)]);
    expect(stages()).toEqual(['missing', 'ready']);
  });

  it('finishes what arrived whole before a reload without its file', async () => {
    queue.adopt([openUpload({ receivedBytes: 1000 })]);
    await flushPromises();
    expect(test.completed).toEqual([{ uploadId: 'upload-old', sha256: undefined }]);
    expect(stages()).toEqual(['measuring']);
  });

  it('adopts an upload once', () => {
    queue.adopt([openUpload()]);
    queue.adopt([openUpload()]);
    expect(queue.items).toHaveLength(1);
  });
});
