import { createHash } from 'node:crypto';
import { createServer, request, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { afterAll, beforeAll, describe, expect, test, vi } from 'vitest';
import { seedRun, seedSetup, smallWav } from '../../../support/server/seed-recordings.ts';
import { nothingStored, storedState } from '../../../support/server/stored-state.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
let runId: string;
let setupId: string;
beforeAll(() => {
  app = createTestApp();
  runId = seedRun(app).id;
  setupId = seedSetup(app).id;
});
afterAll(() => app.close());

const wav = smallWav();
const sha256 = createHash('sha256').update(wav).digest('hex');
const post = () => app.as('contributor').post(`/api/runs/${runId}/recordings`);
const declared = () => post().field('setupId', setupId).field('licence', 'CC-BY-4.0');

describe('a form that cannot be taken leaves nothing', () => {
  test.each([
    ['no file', () => declared(), 422, 'file'],
    [
      'two files',
      () => declared().attach('file', Buffer.from(wav), 'a.wav').attach('file', Buffer.from(wav), 'b.wav'),
      422,
      'file',
    ],
    ['a file in another part', () => declared().attach('sound', Buffer.from(wav), 'a.wav'), 422, 'sound'],
    [
      'no set-up',
      () => post().field('licence', 'CC0-1.0').attach('file', Buffer.from(wav), 'a.wav'),
      422,
      'setupId',
    ],
    [
      'a field that nobody knows',
      () => declared().field('sharing', 'shared').attach('file', Buffer.from(wav), 'a.wav'),
      422,
      '',
    ],
    [
      'a field said twice',
      () => declared().field('licence', 'CC0-1.0').attach('file', Buffer.from(wav), 'a.wav'),
      422,
      'licence',
    ],
    [
      'a number that is none',
      () => declared().field('timeExpansion', 'ten').attach('file', Buffer.from(wav), 'a.wav'),
      422,
      'timeExpansion',
    ],
    [
      'a field without end',
      () => declared().field('note', 'x'.repeat(9000)).attach('file', Buffer.from(wav), 'a.wav'),
      422,
      'note',
    ],
    [
      'another hash',
      () => declared().field('sha256', '0'.repeat(64)).attach('file', Buffer.from(wav), 'a.wav'),
      422,
      undefined,
    ],
    ['no WAV', () => declared().attach('file', Buffer.from('ID3 a song'), 'a.wav'), 422, undefined],
    ['no form', () => post().send({ setupId }), 415, undefined],
  ] as const)('%s', async (_name, send, status, path) => {
    const answer = await send();
    expect(answer.status).toBe(status);
    expect(answer.body.fields[0]?.path).toBe(path);
    expect(storedState(app)).toEqual(nothingStored);
  });

  test('the set-up of another lab', async () => {
    const foreign = seedSetup(app, 'other').id;
    const answer = await post()
      .field('setupId', foreign)
      .field('licence', 'CC0-1.0')
      .attach('file', Buffer.from(wav), 'a.wav');
    expect(answer.body.fields[0].path).toBe('setupId');
    expect(storedState(app)).toEqual(nothingStored);
  });

  test('a run that the person cannot add to is refused before a byte is read', async () => {
    const foreignRun = seedRun(app, 'other').id;
    const answer = await app.as('contributor').post(`/api/runs/${foreignRun}/recordings`).send({});
    expect(answer.status).toBe(404);
  });
});

describe('a form that is not built as one', () => {
  const disposition = 'Content-Disposition: form-data; name=';
  test.each([
    ['nothing', ''],
    ['no boundary at all', 'just some text'],
    ['no end', `--b\r\n${disposition}"licence"\r\n\r\nCC0-1.0`],
    ['no end of the file', `--b\r\n${disposition}"file"; filename="a.wav"\r\n\r\nRIFF`],
    ['no end of a file in another part', `--b\r\n${disposition}"x"; filename="a.wav"\r\n\r\nRIFF`],
    ['a part without a head', '--b\r\n\r\nRIFF\r\n--b--\r\n'],
    ['a head without an end', `--b\r\n${disposition}"file"${'x'.repeat(100_000)}`],
    ['a name like a property of every object', `--b\r\n${disposition}"__proto__"\r\n\r\nx\r\n--b--\r\n`],
    ['a hundred fields', `${`--b\r\n${disposition}"a"\r\n\r\nx\r\n`.repeat(100)}--b--\r\n`],
  ])('%s', async (_name, body) => {
    const answer = await post()
      .set('Content-Type', 'multipart/form-data; boundary=b')
      .send(Buffer.from(body));
    expect([400, 422]).toContain(answer.status);
    expect(answer.body.detail).not.toMatch(/undefined|Error|multipart data/);
    expect(storedState(app)).toEqual(nothingStored);
  });

  test('a boundary that is not said', async () => {
    expect((await post().set('Content-Type', 'multipart/form-data').send(Buffer.from('x'))).status).toBe(415);
  });
});

describe('a connection that breaks within the file', () => {
  let server: Server;
  beforeAll(async () => {
    server = createServer(app.http);
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  });
  afterAll(() => new Promise((resolve) => server.close(resolve)));

  test('leaves nothing', async () => {
    const boundary = 'one-boundary';
    const sending = request({
      port: (server.address() as AddressInfo).port,
      path: `/api/runs/${runId}/recordings`,
      method: 'POST',
      headers: {
        Cookie: `${app.deps.cookie.name}=${app.sessionTokens.contributor}`,
        Origin: app.deps.config.publicUrl,
        'Content-Type': `multipart/form-data; boundary=${boundary}`,
        'Content-Length': String(wav.length + 1000),
      },
    });
    const broken = new Promise((resolve) => sending.once('error', resolve));
    sending.write(`--${boundary}\r\nContent-Disposition: form-data; name="file"; filename="a.wav"\r\n\r\n`);
    sending.write(Buffer.from(wav.subarray(0, 50_000)));
    await vi.waitFor(() => expect(storedState(app).waiting).toHaveLength(1));
    sending.destroy();
    await broken;
    await vi.waitFor(() => expect(storedState(app)).toEqual(nothingStored));
  });
});

describe('a whole form', () => {
  test('makes a recording of the file, measured by the next job and shared where nothing speaks against it', async () => {
    const answer = await declared()
      .field('sha256', sha256)
      .attach('file', Buffer.from(wav), 'drop 7.wav')
      .field('runOffsetNs', '1500');
    expect(answer.status).toBe(201);
    expect(answer.body.recording).toMatchObject({
      ...{ fileName: 'drop 7.wav', sha256, runId, runOffsetNs: 1500, timeExpansion: 1 },
      ...{ processing: 'queued', sharing: 'pending' },
    });
    expect(await app.runJobs()).toBe(1);
    const measured = await app.as('contributor').get(`/api/recordings/${answer.body.recording.id}`);
    expect(measured.body).toMatchObject({
      processing: 'measured',
      progress: 1,
      sharing: 'shared',
      failure: null,
    });
    expect(measured.body.measurement.levels).toHaveLength(1);
  });

  test('with declared sensitivity is held after measuring', async () => {
    const answer = await declared()
      .field('sensitivity', 'voices,other')
      .attach('file', Buffer.from(wav), 'a.wav');
    expect(answer.body.recording.sensitivity).toEqual(['voices', 'other']);
    await app.runJobs();
    const { body } = await app.as('contributor').get(`/api/recordings/${answer.body.recording.id}`);
    expect(body).toMatchObject({ sharing: 'held', findings: [{ place: 'voices' }, { place: 'other' }] });
  });
});
