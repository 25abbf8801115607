import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { createUploadSchema } from '../../../../shared/contract/uploads.ts';
import type { CameraOrigin } from '../../../../shared/contract/camera.ts';
import { filmBytes } from '../../../support/film-fixtures.ts';
import { seedRun, seedSetup, smallWav } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import { complete, sendWhole } from '../../../support/server/tus.ts';
import { fixtureBytes } from '../../../support/wav/format-fixtures.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

const camera: CameraOrigin = {
  fileName: 'drop.mov',
  sizeBytes: 60_000,
  sha256: 'a'.repeat(64),
  container: 'QuickTime',
  codec: 'aac',
  trackSampleRateHz: 48_000,
  soundTracks: 2,
  gaps: 1,
  soundStartS: 0.1,
};

describe('sound that was taken out of a film', () => {
  test('keeps what was told of the film', async () => {
    const id = await sendWhole(app, filmBytes('s24.mov.wav'), { camera });
    const { body } = await complete(app, id);
    const answer = await app.as('contributor').get(`/api/recordings/${body.recording.id}`);
    expect(answer.body).toMatchObject({ camera, frames: 9600, sampleRateHz: 96_000 });
  });

  test('keeps the last part of the name of the film, which is no path', async () => {
    const told = { ...camera, fileName: '../lab/person/drop\u0007.mov' };
    const { body } = await complete(app, await sendWhole(app, smallWav(), { camera: told }));
    expect(body.recording.camera.fileName).toBe('drop.mov');
  });

  test('comes in a form as well', async () => {
    const answer = await app
      .as('contributor')
      .post(`/api/runs/${seedRun(app).id}/recordings`)
      .field({ setupId: seedSetup(app).id, licence: 'CC-BY-4.0', camera: JSON.stringify(camera) })
      .attach('file', Buffer.from(smallWav()), 'drop.wav');
    expect([answer.status, answer.body.recording?.camera]).toEqual([201, camera]);
  });

  test('is a WAV file', async () => {
    const answer = await complete(app, await sendWhole(app, fixtureBytes('ff-16.flac'), { camera }));
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toContain('taken out of a film, but it is no WAV file');
  });

  test('has no film where none was told', async () => {
    const { body } = await complete(app, await sendWhole(app, smallWav()));
    expect(body.recording.camera).toBeNull();
  });
});

describe('a film itself', () => {
  test('is refused, with the way it can come in', async () => {
    const answer = await complete(app, await sendWhole(app, filmBytes('s24.mov')));
    expect([answer.status, answer.body.code]).toEqual([422, 'file-refused']);
    expect(answer.body.detail).toBe(
      'This is a QuickTime film. The page for bringing in takes its sound out; elsewhere, take it out first as uncompressed WAV.',
    );
  });
});

describe('what is told of a film', () => {
  const input = {
    runId: '01890000-0000-7000-8000-000000000000',
    setupId: '01890000-0000-7000-8000-000000000000',
    licence: 'CC-BY-4.0',
    fileName: 'a.wav',
    sizeBytes: 100,
  };

  test('has to hold together', () => {
    expect(createUploadSchema.safeParse({ ...input, camera }).success).toBe(true);
    const changes = [
      { codec: 'unknown' },
      { container: 'AVI' },
      { sha256: 'abc' },
      { sizeBytes: 0 },
      { soundTracks: 0 },
      { gaps: -1 },
      { soundStartS: Number.NaN },
      { trackSampleRateHz: 1e9 },
      { owner: 'somebody' },
    ];
    for (const change of changes) {
      const told = { ...input, camera: { ...camera, ...change } };
      expect([change, createUploadSchema.safeParse(told).success]).toEqual([change, false]);
    }
  });
});
