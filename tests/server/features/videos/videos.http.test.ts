import { createHash } from 'node:crypto';
import { readdirSync } from 'node:fs';
import path from 'node:path';
import { BufferSource, Input, MP4 } from 'mediabunny';
import { afterAll, beforeAll, beforeEach, describe, expect, test } from 'vitest';
import { auditLog } from '../../../../server/db/schema/audit-log.ts';
import { announcedFilmBytes } from '../../../../server/features/videos/receive-film.ts';
import { barsBytes, filmBytes } from '../../../support/film-fixtures.ts';
import { seedPhasePass, seedRunOfRecording } from '../../../support/server/seed-phases.ts';
import { seedPass } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { collectBytes } from '../../../support/server/collect-bytes.ts';

let app: TestApp;
let runId: string;
let recordingId: string;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());
beforeEach(async () => {
  ({ runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' }));
});

type Who = 'contributor' | 'labeler' | 'curator';
const bring = (bytes: Uint8Array, fileName = 'stage 17.webm', agreed = 'true') =>
  app
    .as('contributor')
    .post(`/api/runs/${runId}/videos`)
    .query({ fileName, peopleAgreed: agreed })
    .set('Content-Type', 'application/octet-stream')
    .send(Buffer.from(bytes));
const list = async (who: Who = 'contributor') =>
  (await app.as(who).get(`/api/runs/${runId}/videos`).expect(200)).body;
const download = (id: string, who: Who = 'contributor') =>
  app.as(who).get(`/api/videos/${id}/film`).buffer(true).parse(collectBytes);

describe('bringing in a film', () => {
  test.each([
    ['bars.webm', 'webm'],
    ['bars.mp4', 'mp4'],
  ] as const)('%s is read by its structure and kept byte by byte', async (name, container) => {
    const bytes = barsBytes(name);
    const answer = await bring(bytes, 'a name that says nothing.txt').expect(201);
    expect(answer.body).toMatchObject({
      container,
      widthPx: 96,
      heightPx: 64,
      framesPerS: 10,
      durationS: 4,
      sizeBytes: bytes.length,
      sha256: createHash('sha256').update(bytes).digest('hex'),
      runOffsetNs: null,
      isSoundLeftOut: false,
      editable: true,
    });
    const film = await download(answer.body.id).expect(200);
    expect(film.body.equals(bytes)).toBe(true);
    expect(film.headers).toMatchObject({
      'content-type': `video/${container}`,
      'content-security-policy': "default-src 'none'; sandbox",
      'x-content-type-options': 'nosniff',
      'content-disposition': 'inline',
    });
  });

  test('sends ranges of it, which a player seeks by', async () => {
    const bytes = barsBytes('bars.webm');
    const { body } = await bring(bytes).expect(201);
    const part = await download(body.id).set('Range', 'bytes=100-199').expect(206);
    expect(part.body.equals(bytes.subarray(100, 200))).toBe(true);
    expect(part.headers['content-range']).toBe(`bytes 100-199/${bytes.length}`);
  });

  test('leaves its sound out, so that no voice gets past the screen', async () => {
    const { body } = await bring(filmBytes('aac.mp4'), 'loud.mp4').expect(201);
    expect(body.isSoundLeftOut).toBe(true);
    const film = await download(body.id).expect(200);
    const input = new Input({ formats: [MP4], source: new BufferSource(film.body as Buffer) });
    expect((await input.getTracks()).map(({ type }) => type)).toEqual(['video']);
    expect(
      createHash('sha256')
        .update(film.body as Buffer)
        .digest('hex'),
    ).toBe(body.sha256);
  });

  test.each([
    ['a QuickTime film', () => filmBytes('s24.mov'), /QuickTime/],
    ['words', () => Buffer.from('this is no film at all, whatever its name says'), /no film in MP4 or WebM/],
    [
      'a film that was cut off',
      () => barsBytes('bars.mp4').subarray(0, 3000),
      /cut off or damaged|not whole/,
    ],
    [
      'a head of WebM with nothing behind it',
      () => barsBytes('bars.webm').subarray(0, 40),
      /damaged|no pictures/,
    ],
    [
      'a film without its list of tracks',
      () => {
        const bytes = Buffer.from(barsBytes('bars.mp4'));
        bytes.write('skip', bytes.indexOf('moov'), 'latin1');
        return bytes;
      },
      /list of its tracks/,
    ],
  ])('%s is refused in words, and nothing stays', async (_, bytes, sentence) => {
    const incoming = path.join(app.deps.config.paths.blobs, 'incoming');
    const answer = await bring(bytes(), 'film.mp4');
    expect({ status: answer.status, code: answer.body.code }).toEqual({ status: 422, code: 'file-refused' });
    expect(answer.body.detail).toMatch(sentence);
    expect((await list()).items).toEqual([]);
    expect(readdirSync(incoming)).toEqual([]);
  });

  test('needs the word that whoever can be seen has agreed', async () => {
    const answer = await bring(barsBytes('bars.webm'), 'film.webm', 'false').expect(422);
    expect(answer.body.fields).toEqual([
      { path: 'peopleAgreed', message: 'has to be declared before a film is brought in' },
    ]);
  });

  test('has to say how large it is, and no film is larger than 4 GB', () => {
    const announce = (headers: Record<string, string>) => () => announcedFilmBytes({ headers });
    expect(announce({})).toThrow(/Content-Length/);
    expect(announce({ 'content-length': '4000000001' })).toThrow(/4 GB at most/);
    expect(announce({ 'content-length': '4000000000' })()).toBe(4_000_000_000);
  });
});

describe('the place of a film in its run', () => {
  test('is set from marks, under the revision that was looked at', async () => {
    const { body } = await bring(barsBytes('bars.webm')).expect(201);
    const marks = [{ videoS: 1.25, runTimeNs: 3_000_000_000 }];
    const placed = await app
      .as('contributor')
      .patch(`/api/videos/${body.id}`)
      .set('If-Match', '"1"')
      .send({ runOffsetNs: 1_750_000_000, clockPpm: 12.5, syncMarks: marks })
      .expect(200);
    expect(placed.body).toMatchObject({
      runOffsetNs: 1_750_000_000,
      clockPpm: 12.5,
      syncMarks: marks,
      revision: 2,
    });
    const stale = await app
      .as('contributor')
      .patch(`/api/videos/${body.id}`)
      .set('If-Match', '"1"')
      .send({ runOffsetNs: 0 })
      .expect(412);
    expect(stale.body.current).toMatchObject({ runOffsetNs: 1_750_000_000 });
    await app
      .as('contributor')
      .patch(`/api/videos/${body.id}`)
      .set('If-Match', '"2"')
      .send({ clockPpm: 90_000 })
      .expect(422);
  });
});

describe('removing a film', () => {
  test('hides it and its bytes, and can be taken back', async () => {
    const { body } = await bring(barsBytes('bars.webm')).expect(201);
    const change = (method: 'delete' | 'post', tail: string, revision: number) =>
      app.as('contributor')[method](`/api/videos/${body.id}${tail}`).set('If-Match', `"${revision}"`);
    await change('delete', '', 1).expect(204);
    expect((await list()).items).toEqual([]);
    await download(body.id).expect(404);
    const back = await change('post', '/restore', 2).expect(200);
    expect(back.body).toMatchObject({ id: body.id, revision: 3 });
    expect((await list()).items).toHaveLength(1);
    const rows = app.deps.db.select().from(auditLog).all();
    expect(rows.filter(({ subjectId }) => subjectId === body.id).map(({ action }) => action)).toEqual([
      'video.brought-in',
      'video.removed',
      'video.restored',
    ]);
  });
});

describe('a labeler', () => {
  test('who marks the run blind is shown no film, nor its bytes', async () => {
    const { body } = await bring(barsBytes('bars.webm')).expect(201);
    seedPass(app, recordingId, { blind: true });
    expect(await list('labeler')).toEqual({ items: [], isWithheld: true, mayAdd: false });
    await download(body.id, 'labeler').expect(404);
  });

  test('who marks growth phases has the film, which has no sound', async () => {
    const { body } = await bring(barsBytes('bars.webm')).expect(201);
    seedPhasePass(app, recordingId, true);
    expect((await list('labeler')).items).toMatchObject([{ id: body.id, editable: false }]);
    await download(body.id, 'labeler').expect(200);
  });
});
