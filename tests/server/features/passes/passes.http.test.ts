import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { write } from '../../../../server/db/transaction.ts';
import { replaceRoles } from '../../../../server/features/people/people.queries.ts';
import { seedAssigned } from '../../../support/server/seed-marking.ts';
import { seedMeasured, seedRecording, setSharing } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());

const assign = (recordingId: string, labelerId = app.personIds.labeler) =>
  app.as('curator').post('/api/passes').send({ recordingId, labelerId });

describe('assigning a pass', () => {
  test('is blind unless said otherwise, and appears in the list of its labeler', async () => {
    const recordingId = await seedMeasured(app, { sharing: 'shared' });
    const { body } = await assign(recordingId);
    expect(body).toMatchObject({ blind: true, state: 'assigned', eventCount: 0, durationS: 0.5 });
    const mine = await app.as('labeler').get('/api/passes?mine=true&state=assigned');
    expect(mine.body.items.map((pass: { id: string }) => pass.id)).toContain(body.id);
  });

  test('asks for a measured recording', async () => {
    const answer = await assign(await seedRecording(app, { sharing: 'shared' }));
    expect(answer.status).toBe(409);
    expect(answer.body.detail).toContain('measured');
  });

  test('asks for somebody who marks recordings, and only once', async () => {
    const recordingId = await seedMeasured(app, { sharing: 'shared' });
    const nobody = await assign(recordingId, app.personIds.contributor);
    expect(nobody.body.fields).toEqual([expect.objectContaining({ path: 'labelerId' })]);
    await assign(recordingId).expect(201);
    await assign(recordingId).expect(409);
  });

  test('can be taken back while it is open', async () => {
    const { passId } = await seedAssigned(app);
    const cancelled = await app.as('curator').post(`/api/passes/${passId}/cancel`);
    expect(cancelled.body.state).toBe('cancelled');
    await app.as('labeler').post(`/api/passes/${passId}/finish`).send({}).expect(404);
    await app.as('curator').post(`/api/passes/${passId}/cancel`).expect(409);
  });

  test('disappears with the sharing of its recording', async () => {
    const { recordingId, passId } = await seedAssigned(app);
    setSharing(app, recordingId, 'held');
    const mine = await app.as('labeler').get('/api/passes?mine=true');
    expect(mine.body.items.map((pass: { id: string }) => pass.id)).not.toContain(passId);
    await app.as('labeler').post(`/api/passes/${passId}/finish`).send({}).expect(404);
  });
});

describe('a blind pass', () => {
  test('is blind for a labeler who has another role that shows the recording', async () => {
    const { recordingId } = await seedAssigned(app);
    const { db } = app.deps;
    write(db, (tx) => replaceRoles(tx, app.personIds.labeler, ['labeler', 'curator']));
    try {
      const { body } = await app.as('labeler').get(`/api/recordings/${recordingId}`);
      expect(body).toMatchObject({ blind: true, candidateCount: null });
      await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(404);
    } finally {
      write(db, (tx) => replaceRoles(tx, app.personIds.labeler, ['labeler']));
    }
  });

  test('hides candidates and counts from its labeler until it is finished', async () => {
    const { recordingId, passId } = await seedAssigned(app);
    const seen = async () => (await app.as('labeler').get(`/api/recordings/${recordingId}`)).body;
    expect(await seen()).toMatchObject({ blind: true, candidateCount: null, eventCount: null });
    await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(404);
    await app.as('labeler').post(`/api/passes/${passId}/finish`).send({}).expect(200);
    expect(await seen()).toMatchObject({ blind: false });
    await app.as('labeler').get(`/api/recordings/${recordingId}/candidates`).expect(200);
  });
});
