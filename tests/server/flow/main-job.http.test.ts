import { execFileSync } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { v7 as uuidV7 } from 'uuid';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { runInput, smallWav } from '../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../support/server/test-app.ts';

/* The main job over HTTP alone, as a lab's script would do it: from a WAV file to an archive that sha256sum verifies. */

const wav = Buffer.from(smallWav());
const sha256 = createHash('sha256').update(wav).digest('hex');

let app: TestApp;
let folder: string;
const made = {
  runId: '',
  setupId: '',
  recordingId: '',
  passId: '',
  eventId: '',
  collectionId: '',
  releaseId: '',
};
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
  folder = mkdtempSync(path.join(tmpdir(), 'recalesce-flow-'));
});
afterAll(async () => {
  rmSync(folder, { recursive: true });
  await app.close();
});

describe.sequential('from a recording to a data set', () => {
  test('a contributor describes the run, the sensor and the set-up', async () => {
    const lab = app.as('contributor');
    const credits = [{ name: 'Ines Rautio', orcid: null, role: 'experiment' }];
    const run = await lab.post('/api/runs').send({ ...runInput(app.ownLabId), credits });
    expect(run.status).toBe(201);
    const sensor = await lab
      .post('/api/sensors')
      .send({ labId: app.ownLabId, name: 'Disc sensor', kind: 'contact-ae', lowHz: 1000, highHz: 45_000 });
    const setup = await lab
      .post('/api/setups')
      .send({ sensorId: sensor.body.id, name: 'Under the plate', fullScaleV: 2 });
    expect(setup.status).toBe(201);
    Object.assign(made, { runId: run.body.id, setupId: setup.body.id });
  });

  test('brings the bytes in by tus, in two pieces, and completes the upload', async () => {
    const lab = app.as('contributor');
    const declaration = {
      runId: made.runId,
      setupId: made.setupId,
      fileName: 'freeze 7.wav',
      sizeBytes: wav.length,
    };
    const upload = await lab.post('/api/uploads').send({ ...declaration, licence: 'CC-BY-4.0' });
    expect(upload.status).toBe(201);
    const created = await lab
      .post('/api/uploads/bytes')
      .set({ 'Tus-Resumable': '1.0.0', 'Upload-Length': String(wav.length) })
      .set('Upload-Metadata', `uploadId ${Buffer.from(upload.body.id).toString('base64')}`);
    expect(created.status).toBe(201);
    const half = Math.floor(wav.length / 2);
    for (const [offset, piece] of [
      [0, wav.subarray(0, half)],
      [half, wav.subarray(half)],
    ] as const) {
      const sent = await lab
        .patch(String(created.headers.location))
        .set({ 'Tus-Resumable': '1.0.0', 'Upload-Offset': String(offset) })
        .set('Content-Type', 'application/offset+octet-stream')
        .send(piece);
      expect(sent.status).toBe(204);
    }
    const done = await lab.post(`/api/uploads/${upload.body.id}/complete`).send({ sha256 });
    expect(done.body).toMatchObject({ recording: { sha256, processing: 'queued', sharing: 'pending' } });
    made.recordingId = done.body.recording.id;
  });

  test('is measured by the server, and shared since nothing was found', async () => {
    expect(await app.runJobs()).toBe(1);
    const answer = await app.as('contributor').get(`/api/recordings/${made.recordingId}`);
    expect(answer.body).toMatchObject({ processing: 'measured', sharing: 'shared', failure: null });
    expect(answer.body.measurement.format).toMatchObject({ sampleRateHz: 96_000, frames: 48_000 });
  });

  test('is assigned by a curator to a labeler', async () => {
    const pass = await app
      .as('curator')
      .post('/api/passes')
      .send({ recordingId: made.recordingId, labelerId: app.personIds.labeler });
    expect(pass.body).toMatchObject({ state: 'assigned', blind: true, schemeVersion: 1 });
    made.passId = pass.body.id;
  });

  test('is marked; the server measures the span, and a retry changes nothing', async () => {
    made.eventId = uuidV7();
    const mark = {
      passId: made.passId,
      startSample: 9_600,
      endSample: 9_900,
      classKey: 'crack',
      confidence: 'sure',
    };
    const put = () =>
      app
        .as('labeler')
        .put(`/api/events/${made.eventId}`)
        .send({ ...mark, recordingId: made.recordingId });
    const first = await put();
    expect(first.body).toMatchObject({ id: made.eventId, revision: 1, startSample: 9_600 });
    expect(first.headers.etag).toBe('"1"');
    // The generator wrote bursts of 30 kHz; the transform of 300 samples tells that to a bin of 320 Hz.
    expect(Math.abs(first.body.parameters.peakFrequencyHz - 30_000)).toBeLessThan(640);
    expect((await put()).body).toEqual(first.body);
    const finished = await app
      .as('labeler')
      .post(`/api/passes/${made.passId}/finish`)
      .send({ remark: 'Looked over quickly.' });
    expect(finished.body).toMatchObject({ state: 'finished', eventCount: 1 });
  });

  test('is collected and released from a frozen snapshot', async () => {
    const curator = app.as('curator');
    const collection = await curator.post('/api/collections').send({
      title: 'Sounds of freezing',
      slug: 'sounds-of-freezing',
      description: 'Recordings of droplets that freeze on a cold stage.',
      publisher: 'Northlight Solidification Lab',
      contactEmail: 'data@lab.example',
      creators: [{ name: 'Ines Rautio' }],
    });
    made.collectionId = collection.body.id;
    await curator
      .post(`/api/collections/${made.collectionId}/items`)
      .send({ recordingIds: [made.recordingId] })
      .expect(200, { added: 1, alreadyIn: 0 });
    const gates = await curator.get(`/api/collections/${made.collectionId}/gates`);
    expect(gates.body).toMatchObject({ releasable: true, minimumVersion: '1.0.0', previousVersion: null });
    const release = await curator
      .post(`/api/collections/${made.collectionId}/releases`)
      .send({ version: '1.0.0', licence: 'CC-BY-4.0', notes: 'The first release.' });
    expect(release.body).toMatchObject({ state: 'building', recordingCount: 1, eventCount: 1 });
    made.releaseId = release.body.id;
    expect(await app.runJobs()).toBe(1);
    const built = await curator.get(`/api/releases/${made.releaseId}`);
    expect(built.body).toMatchObject({ state: 'built', failure: null });
  });

  test('cannot be seen by others before it is published', async () => {
    await app.as('anonymous').get(`/api/releases/${made.releaseId}`).expect(404);
    await app.as('curator').post(`/api/releases/${made.releaseId}/publish`).expect(200);
    const page = await app.as('anonymous').get(`/api/releases/${made.releaseId}`);
    expect(page.body).toMatchObject({ state: 'published', classes: [{ key: 'crack', count: 1 }] });
  });

  test('is downloaded in two ranges and verified by sha256sum and sha512sum', async () => {
    const page = (await app.as('anonymous').get(`/api/releases/${made.releaseId}`)).body;
    const archive = Buffer.concat([await range('bytes=0-999'), await range('bytes=1000-')]);
    writeFileSync(path.join(folder, page.fileName), archive);
    const checksum = await app.as('anonymous').get(`/api/releases/${made.releaseId}/archive.sha256`);
    writeFileSync(path.join(folder, 'archive.sha256'), checksum.text);
    expect(run('sha256sum', '-c', 'archive.sha256')).toContain(`${page.fileName}: OK`);
    run('python3', '-m', 'zipfile', '-e', page.fileName, '.');
    const bag = page.fileName.replace(/\.zip$/, '');
    for (const kind of ['manifest', 'tagmanifest']) {
      expect(runIn(bag, 'sha256sum', '-c', `${kind}-sha256.txt`)).not.toContain('FAILED');
      expect(runIn(bag, 'sha512sum', '-c', `${kind}-sha512.txt`)).not.toContain('FAILED');
    }
    const audio = readFileSync(path.join(folder, bag, 'data', 'audio', `${made.recordingId}.wav`));
    expect(audio.equals(wav), 'the audio in the archive is the upload, bit by bit').toBe(true);
    const events = readFileSync(path.join(folder, bag, 'data', 'labels', 'events.csv'), 'utf8');
    expect(events).toContain(`audio/${made.recordingId}.wav,${made.eventId}`);
  });

  async function range(value: string): Promise<Buffer> {
    const answer = await app
      .as('anonymous')
      .get(`/api/releases/${made.releaseId}/archive`)
      .set('Range', value)
      .buffer(true)
      .parse((response, done) => {
        const chunks: Buffer[] = [];
        response.on('data', (chunk: Buffer) => chunks.push(chunk));
        response.on('end', () => done(null, Buffer.concat(chunks)));
      });
    expect(answer.status).toBe(206);
    return answer.body as Buffer;
  }

  function run(command: string, ...args: string[]): string {
    return execFileSync(command, args, { cwd: folder, encoding: 'utf8' });
  }

  function runIn(subfolder: string, command: string, ...args: string[]): string {
    return execFileSync(command, args, { cwd: path.join(folder, subfolder), encoding: 'utf8' });
  }
});
