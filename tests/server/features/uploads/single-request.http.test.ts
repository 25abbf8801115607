import { createHash } from 'node:crypto';
import { existsSync, readdirSync } from 'node:fs';
import { afterEach, beforeEach, describe, expect, test } from 'vitest';
import { recordings } from '../../../../server/db/schema/recordings.ts';
import { seedRun, seedSetup, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeEach(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterEach(() => app.close());

const wav = smallWav();
const sha256 = createHash('sha256').update(wav).digest('hex');

function nothingIsLeft(): boolean {
  const isEmpty = (folder: string) => !existsSync(folder) || readdirSync(folder).length === 0;
  const blobs = readdirSync(app.deps.config.paths.blobs);
  const rows = app.deps.db.select().from(recordings).all();
  return isEmpty(app.deps.config.paths.uploads) && blobs.join() === 'incoming' && rows.length === 0;
}

describe('one form with everything', () => {
  test('makes a recording of the file, measured by the next job', async () => {
    const run = seedRun(app);
    const setup = seedSetup(app);
    const answer = await app
      .as('contributor')
      .post(`/api/runs/${run.id}/recordings`)
      .field('setupId', setup.id)
      .field('licence', 'CC-BY-4.0')
      .field('sha256', sha256)
      .attach('file', Buffer.from(wav), 'drop 7.wav');
    expect(answer.body).toMatchObject({
      recording: { fileName: 'drop 7.wav', sha256, processing: 'queued', sharing: 'pending' },
    });
    expect(answer.status).toBe(201);
    expect(await app.runJobs()).toBe(1);
    const measured = await app.as('contributor').get(`/api/recordings/${answer.body.recording.id}`);
    expect(measured.body).toMatchObject({ processing: 'measured', sharing: 'shared', failure: null });
  });

  test('a file that is no WAV is refused with a sentence, and nothing is left', async () => {
    const run = seedRun(app);
    const answer = await app
      .as('contributor')
      .post(`/api/runs/${run.id}/recordings`)
      .field('setupId', seedSetup(app).id)
      .field('licence', 'CC-BY-4.0')
      .attach('file', Buffer.from('ID3 this is no wav'), 'song.wav');
    expect(answer.status).toBe(422);
    expect(answer.body.code).toBe('file-refused');
    expect(nothingIsLeft()).toBe(true);
  });
});
