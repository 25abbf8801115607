import { createHash } from 'node:crypto';
import { existsSync, writeFileSync } from 'node:fs';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { jobs } from '../../../../server/db/schema/jobs.ts';
import { uploads } from '../../../../server/db/schema/uploads.ts';
import { smallWav, seedRun, seedSetup } from '../../../support/server/seed-recordings.ts';
import { nothingStored, storedState } from '../../../support/server/stored-state.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import {
  announceUpload,
  askOffset,
  complete,
  createStream,
  sendBytes,
  sendWhole,
} from '../../../support/server/tus.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp();
});
afterEach(() => app.close());

const wav = smallWav();
const sha256 = createHash('sha256').update(wav).digest('hex');

describe('completing an upload', () => {
  test('stores the bytes under their hash, queues the measurement, and clears the way', async () => {
    const id = await sendWhole(app, wav, { note: 'Second try', runOffsetNs: 5, sensitivity: ['voices'] });
    const answer = await complete(app, id, { sha256 });
    expect(answer.status).toBe(200);
    expect(answer.body.recording).toMatchObject({
      ...{ sha256, sizeBytes: wav.length, fileName: 'drop.wav', note: 'Second try', runOffsetNs: 5 },
      ...{ processing: 'queued', sharing: 'pending', sampleRateHz: 96_000, frames: 48_000, channels: 1 },
      findings: [{ kind: 'declared-sensitivity', place: 'voices' }],
    });
    expect(storedState(app)).toMatchObject({ waiting: [], incoming: [], rows: 1 });
    expect(existsSync(app.deps.store.pathOf(sha256))).toBe(true);
    const queued = app.deps.db.select().from(jobs).all();
    expect(queued).toMatchObject([{ kind: 'measure', payload: { recordingId: answer.body.recording.id } }]);
    const actions = app.deps.db
      .select()
      .from(auditLog)
      .all()
      .map((row) => row.action);
    expect(actions).toContain('recording.brought-in');
  });

  test('asked twice, also at once, makes one recording and answers it each time', async () => {
    const id = await sendWhole(app, wav);
    const answers = await Promise.all([complete(app, id), complete(app, id)]);
    const again = await complete(app, id, { sha256 });
    const ids = [...answers, again].map((answer) => answer.body.recording.id);
    expect(new Set(ids).size).toBe(1);
    expect(storedState(app).rows).toBe(1);
  });

  test('goes on after the process died between storing the bytes and writing the row', async () => {
    const id = await sendWhole(app, wav);
    const incoming = app.deps.store.tempPath();
    writeFileSync(incoming, wav);
    await app.deps.store.putFile(incoming, sha256);
    expect((await complete(app, id, { sha256 })).body.recording.sha256).toBe(sha256);
  });

  test('is refused with 409 as long as bytes are missing, and the upload goes on', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    await sendBytes(app, id, 0, wav.subarray(0, 1000));
    const early = await complete(app, id);
    expect([early.status, early.body.detail]).toEqual([
      409,
      '1.0 kB of 96 kB have arrived; go on with the upload.',
    ]);
    await sendBytes(app, id, 1000, wav.subarray(1000));
    expect((await complete(app, id)).status).toBe(200);
  });

  test('bytes that are not the announced ones are removed, and the answer names both hashes', async () => {
    const id = await sendWhole(app, wav);
    const announced = '0'.repeat(64);
    const answer = await complete(app, id, { sha256: announced });
    expect([answer.status, answer.body.code]).toEqual([422, 'checksum-mismatch']);
    expect(answer.body.detail).toContain(sha256);
    expect(answer.body.detail).toContain(announced);
    expect(storedState(app)).toEqual(nothingStored);
    expect(app.deps.db.select().from(uploads).get()?.state).toBe('cancelled');
  });

  test('a declared time expansion is applied once, to the rate', async () => {
    const id = await sendWhole(app, wav, { timeExpansion: 10 });
    const { recording } = (await complete(app, id)).body;
    expect(recording).toMatchObject({ sampleRateHz: 960_000, durationS: 0.05, timeExpansion: 10 });
    expect(recording.format.warnings.join(' ')).toContain('time-expanded');
  });

  test('personal metadata in the file become findings that name chunk and field', async () => {
    const body = Buffer.concat([
      Buffer.from('INFOIART'),
      Buffer.from([12, 0, 0, 0]),
      Buffer.from('Runa Ashford'),
    ]);
    const named = smallWav({ extraChunks: [{ id: 'LIST', body }] });
    const id = await sendWhole(app, named);
    const { recording } = (await complete(app, id)).body;
    expect(recording.findings).toMatchObject([{ kind: 'personal-metadata', place: 'INFO/IART' }]);
  });
});

describe('open uploads', () => {
  test('are listed for their owner alone, with the bytes that have arrived', async () => {
    const id = await announceUpload(app, wav.length);
    await createStream(app, id, wav.length);
    await sendBytes(app, id, 0, wav.subarray(0, 777));
    const own = await app.as('contributor').get('/api/uploads');
    expect(own.body.items).toMatchObject([{ id, receivedBytes: 777, sizeBytes: wav.length, state: 'open' }]);
    expect((await app.as('otherContributor').get('/api/uploads')).body.items).toEqual([]);
  });

  test('end by cancelling: the bytes are gone, and every later request says so', async () => {
    const id = await sendWhole(app, wav);
    expect((await app.as('contributor').delete(`/api/uploads/${id}`)).status).toBe(204);
    expect(storedState(app)).toEqual(nothingStored);
    expect((await askOffset(app, id)).status).toBe(410);
    expect((await complete(app, id)).status).toBe(410);
    expect((await app.as('contributor').delete(`/api/uploads/${id}`)).status).toBe(204);
  });

  test('end by themselves a week after the last sign of life, never while they are complete', async () => {
    const day = 24 * 60 * 60_000;
    const finished = await sendWhole(app, wav);
    const recordingId = (await complete(app, finished)).body.recording.id;
    const active = await announceUpload(app, wav.length);
    await createStream(app, active, wav.length);
    const idle = await sendWhole(app, smallWav({ bitsPerSample: 24 }));
    app.clock.advance(6 * day);
    app.deps.services.uploads.keepAlive(active);
    app.clock.advance(2 * day);
    expect(await app.deps.services.uploadSweep.sweep()).toBe(1);
    const states = app.deps.db
      .select()
      .from(uploads)
      .all()
      .map(({ id, state }) => [id, state]);
    expect(Object.fromEntries(states)).toEqual({
      [finished]: 'complete',
      [active]: 'open',
      [idle]: 'expired',
    });
    expect(storedState(app).waiting).toEqual([active]);
    expect(await app.deps.store.has(sha256)).toBe(true);
    const again = await app.deps.services.completion.complete(app.actor('contributor'), finished);
    expect(again.id).toBe(recordingId);
  });

  test('are at most twenty for one person', async () => {
    const facts = {
      runId: seedRun(app).id,
      setupId: seedSetup(app).id,
      fileName: 'a.wav',
      licence: 'CC0-1.0',
    };
    const announce = () =>
      app
        .as('contributor')
        .post('/api/uploads')
        .send({ ...facts, sizeBytes: 100 });
    const answers = await Promise.all(Array.from({ length: 22 }, announce));
    const statuses = answers.map((answer) => answer.status).sort();
    expect(statuses).toEqual([...Array<number>(20).fill(201), 409, 409]);
    await app
      .as('contributor')
      .delete(`/api/uploads/${answers.find(({ status }) => status === 201)?.body.id}`);
    expect((await announce()).status).toBe(201);
  });
});

describe('announcing', () => {
  test('refuses a run and a set-up of other labs as fields, without telling whether they exist', async () => {
    const facts = { fileName: 'a.wav', sizeBytes: 100, licence: 'CC0-1.0' };
    const send = (runId: string, setupId: string) =>
      app
        .as('contributor')
        .post('/api/uploads')
        .send({ ...facts, runId, setupId });
    const unknown = '01890000-0000-7000-8000-000000000000';
    const own = { runId: seedRun(app).id, setupId: seedSetup(app).id };
    const foreign = { runId: seedRun(app, 'other').id, setupId: seedSetup(app, 'other').id };
    const runs = [await send(foreign.runId, own.setupId), await send(unknown, own.setupId)];
    const setups = [await send(own.runId, foreign.setupId), await send(own.runId, unknown)];
    expect(runs.map(({ body }) => body.fields[0].path)).toEqual(['runId', 'runId']);
    expect(setups.map(({ body }) => body.fields[0].path)).toEqual(['setupId', 'setupId']);
    expect(runs[0]?.body.detail).toBe(runs[1]?.body.detail);
    expect(setups[0]?.body.detail).toBe(setups[1]?.body.detail);
  });

  test.each([
    { sizeBytes: 0, message: 'is an empty file' },
    { sizeBytes: 64 * 2 ** 30 + 1, message: 'is larger than 64 GiB' },
  ])('$sizeBytes bytes: $message', async ({ sizeBytes, message }) => {
    const facts = {
      runId: seedRun(app).id,
      setupId: seedSetup(app).id,
      fileName: 'a.wav',
      licence: 'CC0-1.0',
    };
    const answer = await app
      .as('contributor')
      .post('/api/uploads')
      .send({ ...facts, sizeBytes });
    expect(answer.body.fields).toEqual([{ path: 'sizeBytes', message }]);
  });

  test('a file name is a name: paths and control characters are taken off', async () => {
    const id = await sendWhole(app, wav, { fileName: '..\\..\\etc/..//dr\u0000op\u202e.wav' });
    expect((await complete(app, id)).body.recording.fileName).toBe('drop.wav');
  });
});
