import { afterAll, beforeAll, expect, test } from 'vitest';
import type { Home } from '../../../../shared/contract/home.ts';
import { seedAssigned, seedCollection } from '../../../support/server/seed-marking.ts';
import { seedMeasured, seedRecording } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';
import type { ActorName } from '../../../support/server/seed-actors.ts';

let app: TestApp;
beforeAll(async () => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
  await seedMeasured(app, { sensitivity: ['voices'], fileName: 'held.wav' });
  await seedRecording(app, { fileName: 'queued.wav' });
  await seedMeasured(app, { sharing: 'shared', fileName: 'nobody-marks.wav' });
  await seedAssigned(app, { fileName: 'assigned.wav' });
  seedCollection(app);
});
afterAll(() => app.close());

async function homeOf(name: ActorName): Promise<Record<string, string[]>> {
  const { body } = await app.as(name).get('/api/home');
  return Object.fromEntries(
    (body as Home).sections.map(({ key, items }) => [key, items.map((item) => item.title)]),
  );
}

test('a contributor sees what is on its way and what waits for a reviewer', async () => {
  expect(await homeOf('contributor')).toEqual({
    'my-uploads': ['queued.wav'],
    'held-mine': ['held.wav'],
    'failed-measurements': [],
  });
});

test('a reviewer sees what is to be decided', async () => {
  expect(await homeOf('reviewer')).toEqual({ 'to-decide': ['held.wav'] });
});

test('a labeler sees the assigned passes', async () => {
  expect(await homeOf('labeler')).toEqual({ 'my-passes': ['assigned.wav'] });
});

test('a curator sees what nobody marks yet, and nothing that is held', async () => {
  expect(await homeOf('curator')).toEqual({
    'overdue-passes': [],
    'to-assign': ['nobody-marks.wav'],
    'releases-in-preparation': [],
  });
});

test('somebody of another lab sees nothing of it', async () => {
  expect(await homeOf('otherContributor')).toEqual({
    'my-uploads': [],
    'held-mine': [],
    'failed-measurements': [],
  });
});

test('a pass tells its kind, its likely minutes and whether it is overdue, to its labeler and to curators', async () => {
  const own = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
  const windows = { count: 3, lengthS: 0.05 };
  const dueAt = '2001-01-01T00:00:00.000Z';
  await seedAssigned(own, { fileName: 'late.wav', pass: { kind: 'windows', windows, dueAt } });
  const sectionOf = async (name: ActorName, key: string) => {
    const { body } = await own.as(name).get('/api/home');
    return (body as Home).sections.find((section) => section.key === key)?.items[0];
  };
  expect(await sectionOf('labeler', 'my-passes')).toMatchObject({
    detail: 'Water droplet, slow cooling, 3 windows, blind, likely 1 min, overdue since',
    at: dueAt,
  });
  expect(await sectionOf('curator', 'overdue-passes')).toMatchObject({
    title: 'late.wav',
    detail: 'Test labeler, overdue since',
    at: dueAt,
  });
  await own.close();
});
