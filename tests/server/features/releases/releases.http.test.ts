import { readFileSync } from 'node:fs';
import path from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import type { Release } from '../../../../shared/contract/releases.ts';
import { seedAssigned, seedCollection, seedCredit, seedMark } from '../../../support/server/seed-marking.ts';
import { setSharing } from '../../../support/server/seed-recordings.ts';
import { createTestApp, type TestApp } from '../../../support/server/test-app.ts';

let app: TestApp;
beforeAll(() => {
  app = createTestApp({ RECALESCE_LOG_LEVEL: 'error' });
});
afterAll(() => app.close());

let slugs = 0;

/** A collection of one marked recording whose gates are all in order. */
async function seedReleasable() {
  const assigned = await seedAssigned(app);
  await seedMark(app, assigned, { note: '=HYPERLINK("x")' });
  app.deps.services.passes.finish(app.actor('labeler'), assigned.passId, 'Looked over quickly.');
  seedCredit(app, assigned.recordingId);
  const collectionId = seedCollection(app, [assigned.recordingId], `collection-${(slugs += 1)}`);
  return { ...assigned, collectionId };
}

const create = (collectionId: string, version = '1.0.0', licence = 'CC-BY-4.0') =>
  app
    .as('curator')
    .post(`/api/collections/${collectionId}/releases`)
    .send({ version, licence, notes: 'Released for the first time.' });

async function publish(collectionId: string, version = '1.0.0'): Promise<Release> {
  const { body } = await create(collectionId, version).expect(201);
  await app.runJobs();
  const published = await app.as('curator').post(`/api/releases/${body.id}/publish`);
  expect(published.body).toMatchObject({ state: 'published' });
  return published.body;
}

describe('a release', () => {
  test('built twice from one collection has the same bytes', async () => {
    const { collectionId } = await seedReleasable();
    const shas: (string | null)[] = [];
    for (let turn = 0; turn < 2; turn += 1) {
      const { body } = await create(collectionId).expect(201);
      await app.runJobs();
      const built = await app.as('curator').get(`/api/releases/${body.id}`);
      expect(built.body).toMatchObject({ state: 'built', failure: null });
      shas.push(built.body.sha256);
      app.clock.advance(60_000);
    }
    expect(shas[0]).toBe(shas[1]);
  });

  test('keeps people behind numbers', async () => {
    const { collectionId } = await seedReleasable();
    const release = await publish(collectionId);
    const archive = readFileSync(path.join(app.deps.config.paths.archives, release.fileName ?? ''));
    expect(archive.includes('labeler-01')).toBe(true);
    expect(archive.includes(app.personIds.labeler)).toBe(false);
    expect(archive.includes('Test labeler')).toBe(false);
  });

  test('never changes once it is published: the same version is refused, and so is a smaller one', async () => {
    const { collectionId } = await seedReleasable();
    await publish(collectionId, '1.2.0');
    for (const version of ['1.2.0', '1.1.9', '0.9.0']) {
      const answer = await create(collectionId, version);
      expect(answer.status).toBe(422);
      expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'version' })]);
    }
  });

  test('needs a minor step for a new recording, and a major one where one went', async () => {
    const first = await seedReleasable();
    await publish(first.collectionId);
    const second = await seedReleasable();
    const items = `/api/collections/${first.collectionId}/items`;
    await app
      .as('curator')
      .post(items)
      .send({ recordingIds: [second.recordingId] })
      .expect(200);
    const gates = async () =>
      (await app.as('curator').get(`/api/collections/${first.collectionId}/gates`)).body;
    expect(await gates()).toMatchObject({ minimumVersion: '1.1.0', previousVersion: '1.0.0' });
    expect((await create(first.collectionId, '1.0.1')).status).toBe(422);
    await app.as('curator').delete(`${items}/${first.recordingId}`).expect(204);
    expect(await gates()).toMatchObject({ minimumVersion: '2.0.0' });
  });

  test('is refused while a gate is open, with the reason', async () => {
    const { collectionId, recordingId } = await seedReleasable();
    setSharing(app, recordingId, 'held');
    const answer = await create(collectionId);
    expect(answer.status).toBe(409);
    expect(answer.body.detail).toContain('not shared');
  });

  test('cannot go out when a recording in it was held after it was built', async () => {
    const { collectionId, recordingId } = await seedReleasable();
    const { body } = await create(collectionId).expect(201);
    await app.runJobs();
    setSharing(app, recordingId, 'held');
    const answer = await app.as('curator').post(`/api/releases/${body.id}/publish`);
    expect(answer.status).toBe(409);
    expect(answer.body.detail).toContain('not shared any more');
  });

  test('may not be looser than its members', async () => {
    const { collectionId } = await seedReleasable();
    const answer = await create(collectionId, '1.0.0', 'CC0-1.0');
    expect(answer.body.fields).toEqual([expect.objectContaining({ path: 'licence' })]);
  });

  test('that was withdrawn keeps its page and checksums, and gives no bytes', async () => {
    const { collectionId } = await seedReleasable();
    const { id, sha256 } = await publish(collectionId);
    await app
      .as('curator')
      .post(`/api/releases/${id}/withdraw`)
      .send({ reason: 'One channel had a wrong scale.' })
      .expect(200);
    const page = await app.as('anonymous').get(`/api/releases/${id}`);
    expect(page.body).toMatchObject({
      state: 'withdrawn',
      sha256,
      withdrawnReason: 'One channel had a wrong scale.',
    });
    const archive = await app.as('anonymous').get(`/api/releases/${id}/archive`);
    expect(archive.status).toBe(410);
    expect(archive.body.detail).toContain('wrong scale');
  });

  test('answers a download with its digest and a strong validator', async () => {
    const { collectionId } = await seedReleasable();
    const { id, sha256 } = await publish(collectionId);
    const head = await app.as('anonymous').get(`/api/releases/${id}/archive`).set('Range', 'bytes=0-3');
    expect(head.status).toBe(206);
    expect(head.headers).toMatchObject({
      etag: `"${sha256}"`,
      'repr-digest': `sha-256=:${Buffer.from(sha256 ?? '', 'hex').toString('base64')}:`,
      'content-disposition': expect.stringContaining('attachment'),
    });
    const unchanged = await app
      .as('anonymous')
      .get(`/api/releases/${id}/archive`)
      .set('If-None-Match', `"${sha256}"`);
    expect(unchanged.status).toBe(304);
  });
});
