import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { runInput, seedRun } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp();
});
afterAll(() => app.close());

describe('runs over HTTP', () => {
  test('a new run is answered whole, with its revision as ETag', async () => {
    const answer = await app.as('contributor').post('/api/runs').send(runInput(app.ownLabId));
    expect(answer.status).toBe(201);
    expect(answer.headers['etag']).toBe('"1"');
    expect(answer.body).toMatchObject({
      labName: 'Northlight Solidification Lab',
      editable: true,
      recordingCount: 0,
    });
  });

  test('a change without If-Match is answered with 428, one from an old revision with 412', async () => {
    const { id } = seedRun(app);
    const put = () => app.as('contributor').put(`/api/runs/${id}`).send(runInput(app.ownLabId, 'Changed'));
    expect((await put()).status).toBe(428);
    expect((await put().set('If-Match', '"1"')).headers['etag']).toBe('"2"');
    const stale = await put().set('If-Match', '"1"');
    expect(stale.status).toBe(412);
    expect(stale.body.current).toMatchObject({ title: 'Changed', revision: 2 });
  });

  test('what is wrong is told field by field', async () => {
    const input = { ...runInput(app.ownLabId), title: 'x', startTemperatureC: -300 };
    const answer = await app.as('contributor').post('/api/runs').send(input);
    expect(answer.status).toBe(422);
    expect(answer.body.fields).toEqual([
      { path: 'title', message: 'needs at least 3 characters' },
      { path: 'startTemperatureC', message: 'is below absolute zero' },
    ]);
  });

  test('an id that is none and an unknown one look the same', async () => {
    const none = await app.as('contributor').get('/api/runs/7');
    const unknown = await app.as('contributor').get('/api/runs/01890000-0000-7000-8000-000000000000');
    expect([none.status, unknown.status]).toEqual([404, 404]);
  });
});
