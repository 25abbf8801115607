import { createHash } from 'node:crypto';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { decodeTile } from '../../../../shared/audio/tile.ts';
import { seedMeasured, seedPass, seedRecording, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { collectBytes } from '../../../support/server/collect-bytes.ts';

let app: TestApp;
let id: string;
beforeAll(async () => {
  app = createTestApp();
  id = await seedMeasured(app, { fileName: 'Tröpfchen "7".wav', sharing: 'shared' });
});
afterAll(() => app.close());

const wav = Buffer.from(smallWav());
const sha256 = createHash('sha256').update(wav).digest('hex');
const get = (tail: string, name: 'contributor' | 'otherContributor' = 'contributor') =>
  app.as(name).get(`/api/recordings/${id}${tail}`);
const binary = (tail: string) => get(tail).buffer(true).parse(collectBytes);

describe('the original bytes', () => {
  test('come unchanged, under their hash, as a download that nobody else keeps', async () => {
    const answer = await binary('/audio');
    expect(answer.body).toEqual(wav);
    expect(answer.headers).toMatchObject({
      etag: `"${sha256}"`,
      'content-type': 'audio/wav',
      'cache-control': 'private, no-cache',
      'accept-ranges': 'bytes',
      'content-disposition': `attachment; filename="Tr_pfchen _7_.wav"; filename*=UTF-8''Tr%C3%B6pfchen%20%227%22.wav`,
    });
    expect(answer.headers['content-encoding']).toBeUndefined();
  });

  test('come in ranges', async () => {
    const part = await binary('/audio').set('Range', 'bytes=44-143');
    expect(part.status).toBe(206);
    expect(part.headers['content-range']).toBe(`bytes 44-143/${wav.length}`);
    expect(part.body).toEqual(wav.subarray(44, 144));
    expect((await get('/audio').set('Range', `bytes=${wav.length}-`)).status).toBe(416);
  });

  test('are not sent again to whoever has them, and sent whole where the range belongs to other bytes', async () => {
    expect((await get('/audio').set('If-None-Match', `"${sha256}"`)).status).toBe(304);
    const other = await binary('/audio').set('Range', 'bytes=0-9').set('If-Range', '"another"');
    expect([other.status, other.body.length]).toEqual([200, wav.length]);
  });
});

describe('views', () => {
  test('do not exist before the measurement, and the answer says so', async () => {
    const queued = await seedRecording(app);
    for (const tail of [
      '/peaks',
      '/spectrogram/layout',
      '/spectrum',
      '/frames.csv',
      '/candidates',
      '/listen?startSample=0&endSample=10',
    ]) {
      const answer = await app.as('contributor').get(`/api/recordings/${queued}${tail}`);
      expect([answer.status, answer.body.detail]).toEqual([
        409,
        'This recording is not measured yet; its views come with the measurement.',
      ]);
    }
  });

  test('peaks hold the least and the greatest sample of each step', async () => {
    const { body } = await get('/peaks?points=10');
    expect(body).toMatchObject({ channel: 0, startSample: 0 });
    expect(Math.max(...body.maximum)).toBeGreaterThan(0.3);
    expect(Math.min(...body.minimum)).toBeLessThan(-0.3);
  });

  test('the layout names tiles that exist, each readable and kept under its measurement', async () => {
    const { body: layout } = await get('/spectrogram/layout');
    expect(layout.pictures.map(({ band }: { band: string }) => band)).toEqual(['audible', 'ultrasonic']);
    for (const { band, levels } of layout.pictures) {
      const answer = await binary(`/spectrogram/${band}/${levels - 1}/0`);
      expect(decodeTile(answer.body).columns).toBeGreaterThan(0);
      const again = await get(`/spectrogram/${band}/${levels - 1}/0`).set(
        'If-None-Match',
        String(answer.headers['etag']),
      );
      expect(again.status).toBe(304);
      expect((await get(`/spectrogram/${band}/${levels}/0`)).status).toBe(404);
      expect((await get(`/spectrogram/${band}/0/99999`)).status).toBe(404);
    }
    expect((await get('/spectrogram/infrared/0/0')).status).toBe(404);
  });

  test.each(['/peaks', '/spectrum', '/frames.csv', '/listen?startSample=0&endSample=10'])(
    '%s of a channel that does not exist is missing',
    async (tail) => {
      const answer = await get(`${tail}${tail.includes('?') ? '&' : '?'}channel=1`);
      expect(answer.status).toBe(404);
    },
  );

  test('the table of frames has one line for each frame under a line of names', async () => {
    const answer = await get('/frames.csv').buffer(true);
    const lines = answer.text.trimEnd().split('\r\n');
    expect(lines[0]).toMatch(/^startSample,endSample,timeS,/);
    const widths = new Set(lines.map((line) => line.split(',').length));
    expect(widths.size).toBe(1);
    expect(lines.length).toBeGreaterThan(10);
    expect(answer.headers['content-type']).toBe('text/csv; charset=utf-8');
  });

  test('the table of frames, which tells the course above 20 kHz, is withheld from whoever works blind', async () => {
    const ofLabeler = async (blind: boolean) => {
      const recordingId = await seedMeasured(app, { sharing: 'shared' });
      seedPass(app, recordingId, { blind });
      return (await app.as('labeler').get(`/api/recordings/${recordingId}/frames.csv`)).status;
    };
    expect(await ofLabeler(true)).toBe(404);
    expect(await ofLabeler(false)).toBe(200);
  });

  test('the spectrum has quiet and greatest density on one axis', async () => {
    const { body } = await get('/spectrum');
    expect(body.quietDbPerHz).toHaveLength(body.frequenciesHz.length);
    expect(body.maximumDbPerHz).toHaveLength(body.frequenciesHz.length);
  });
});
