import { insertArtifact, updateRelease } from '../../../server/features/releases/releases.queries.ts';
import type { ReleaseState } from '../../../shared/contract/releases.ts';
import { collectionInput, seedCollection, seedCredit } from '../server/seed-marking.ts';
import { seedMeasured } from '../server/seed-recordings.ts';
import type { TestApp } from '../server/test-app.ts';
import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';
import { mkdirSync, writeFileSync } from 'node:fs';
import path from 'node:path';

const curatorOnly = (status: number) => signedIn(404, { curator: status });
const held = async (app: TestApp) => seedMeasured(app, { sharing: 'held' });

const input = { version: '1.0.0', licence: 'CC-BY-4.0', notes: 'The first release.' } as const;

async function seedReleasable(app: TestApp): Promise<string> {
  const recordingId = await seedMeasured(app, { sharing: 'shared' });
  seedCredit(app, recordingId);
  return seedCollection(app, [recordingId]);
}

/** A release in the state asked for, with a file in the place of its archive. */
async function seedRelease(app: TestApp, state: ReleaseState): Promise<string> {
  const collectionId = await seedReleasable(app);
  const { id } = await app.deps.services.releases.create(app.actor('curator'), collectionId, input);
  const { db, config } = app.deps;
  mkdirSync(config.paths.archives, { recursive: true });
  writeFileSync(path.join(config.paths.archives, 'freezing-sounds-1.0.0.zip'), 'archive');
  const fileName = 'freezing-sounds-1.0.0.zip';
  const sha256 = 'a'.repeat(64);
  insertArtifact(db, { releaseId: id, fileName, sizeBytes: 7, sha256, files: [], verifiedAtMs: 0 });
  const publishedAtMs = state === 'published' ? app.clock.nowMs() : null;
  updateRelease(db, id, {
    state,
    publishedAtMs,
    withdrawnReason: state === 'withdrawn' ? 'A wrong scale.' : null,
  });
  return id;
}

function releaseRows(tail: string, published: number, withdrawn: number): MatrixRow[] {
  const route = `GET /api/releases/:id${tail}`;
  const row = (state: ReleaseState, expected: MatrixRow['expected']): MatrixRow => ({
    route,
    state,
    prepare: async (app) => ({ path: `/api/releases/${await seedRelease(app, state)}${tail}` }),
    expected,
  });
  const inPreparation = everybody(404, { curator: published, disabled: 404 });
  return [
    row('published', everybody(published)),
    row('withdrawn', everybody(withdrawn)),
    row('built', inPreparation),
  ];
}

/** Reviews, collections, releases, and what waits on Home. */
export const releasingRows: MatrixRow[] = [
  { route: 'GET /api/home', prepare: () => ({ path: '/api/home' }), expected: signedIn(200) },
  { route: 'GET /api/reviews', prepare: () => ({ path: '/api/reviews' }), expected: signedIn(200) },
  {
    route: 'GET /api/recordings/:id/decisions',
    state: 'held',
    prepare: async (app) => ({ path: `/api/recordings/${await held(app)}/decisions` }),
    expected: signedIn(404, { reviewer: 200 }),
  },
  {
    route: 'POST /api/recordings/:id/decision',
    state: 'held',
    prepare: async (app) => ({
      path: `/api/recordings/${await held(app)}/decision`,
      body: { decision: 'clear', reason: 'Nothing of it is sensitive.' },
    }),
    expected: signedIn(404, { reviewer: 201 }),
  },
  {
    route: 'GET /api/collections',
    prepare: () => ({ path: '/api/collections' }),
    expected: curatorOnly(200),
  },
  {
    route: 'POST /api/collections',
    prepare: () => ({ path: '/api/collections', body: collectionInput() }),
    expected: curatorOnly(201),
  },
  {
    route: 'GET /api/collections/:id',
    prepare: (app) => ({ path: `/api/collections/${seedCollection(app)}` }),
    expected: curatorOnly(200),
  },
  {
    route: 'PUT /api/collections/:id',
    prepare: (app) => ({
      path: `/api/collections/${seedCollection(app)}`,
      body: collectionInput(),
      headers: { 'If-Match': '"1"' },
    }),
    expected: curatorOnly(200),
  },
  {
    route: 'GET /api/collections/:id/items',
    prepare: (app) => ({ path: `/api/collections/${seedCollection(app)}/items` }),
    expected: curatorOnly(200),
  },
  {
    route: 'POST /api/collections/:id/items',
    prepare: async (app) => ({
      path: `/api/collections/${seedCollection(app)}/items`,
      body: { recordingIds: [await seedMeasured(app, { sharing: 'shared' })] },
    }),
    expected: curatorOnly(200),
  },
  {
    route: 'DELETE /api/collections/:id/items/:recordingId',
    prepare: async (app) => {
      const recordingId = await seedMeasured(app, { sharing: 'shared' });
      return { path: `/api/collections/${seedCollection(app, [recordingId])}/items/${recordingId}` };
    },
    expected: curatorOnly(204),
  },
  {
    route: 'GET /api/collections/:id/gates',
    prepare: async (app) => ({ path: `/api/collections/${await seedReleasable(app)}/gates` }),
    expected: curatorOnly(200),
  },
  {
    route: 'POST /api/collections/:id/releases',
    prepare: async (app) => ({ path: `/api/collections/${await seedReleasable(app)}/releases`, body: input }),
    expected: curatorOnly(201),
  },
  {
    route: 'POST /api/releases/:id/publish',
    state: 'built',
    prepare: async (app) => ({ path: `/api/releases/${await seedRelease(app, 'built')}/publish` }),
    expected: curatorOnly(200),
  },
  {
    route: 'POST /api/releases/:id/withdraw',
    state: 'published',
    prepare: async (app) => ({
      path: `/api/releases/${await seedRelease(app, 'published')}/withdraw`,
      body: { reason: 'The scale of one channel was wrong.' },
    }),
    expected: signedIn(403, { curator: 200 }),
  },
  { route: 'GET /api/releases', prepare: () => ({ path: '/api/releases' }), expected: everybody(200) },
  ...releaseRows('', 200, 200),
  ...releaseRows('/archive', 200, 410),
  ...releaseRows('/archive.sha256', 200, 410),
];
