import { v7 as uuidV7 } from 'uuid';
import { markInput, seedAssigned, seedMark } from '../server/seed-marking.ts';
import { seedRound } from '../server/seed-rounds.ts';
import { seedMeasured } from '../server/seed-recordings.ts';
import type { TestApp } from '../server/test-app.ts';
import { everybody, signedIn, type MatrixRow } from './matrix-row.ts';

async function markRequest(app: TestApp, held = false) {
  const assigned = await seedAssigned(app);
  const event = await seedMark(app, assigned);
  if (held) app.deps.services.guard.share(app.deps.db as never, assigned.recordingId, 'held');
  return { path: `/api/events/${event.id}`, headers: { 'If-Match': '"1"' } };
}

async function answerRequest(app: TestApp) {
  const { passId } = await seedRound(app);
  const { items } = await app.deps.services.rounds.page(app.actor('labeler'), passId, { limit: 1 });
  return { passId, candidateId: items[0]!.candidate.id, answer: { id: uuidV7(), verdict: 'no-event' } };
}

const labelerOnly = (status: number) => signedIn(404, { labeler: status });
const curatorOnly = (status: number) => signedIn(403, { curator: status });

/** Schemes, passes and marks. */
export const markingRows: MatrixRow[] = [
  {
    route: 'GET /api/schemes/newest',
    prepare: () => ({ path: '/api/schemes/newest' }),
    expected: everybody(200),
  },
  {
    route: 'GET /api/schemes/:version',
    prepare: (app) => ({ path: `/api/schemes/${app.deps.services.schemes.newest().version}` }),
    expected: everybody(200),
  },
  { route: 'GET /api/passes', prepare: () => ({ path: '/api/passes' }), expected: signedIn(200) },
  {
    route: 'POST /api/passes',
    state: 'for a shared recording',
    prepare: async (app) => {
      const recordingId = await seedMeasured(app, { sharing: 'shared' });
      return { path: '/api/passes', body: { recordingId, labelerId: app.personIds.labeler } };
    },
    expected: curatorOnly(201),
  },
  {
    route: 'POST /api/passes',
    state: 'for a held recording',
    prepare: async (app) => {
      const recordingId = await seedMeasured(app, { sharing: 'held' });
      return { path: '/api/passes', body: { recordingId, labelerId: app.personIds.labeler } };
    },
    expected: curatorOnly(404),
  },
  {
    route: 'POST /api/passes/:id/finish',
    prepare: async (app) => ({
      path: `/api/passes/${(await seedAssigned(app)).passId}/finish`,
      body: { remark: 'Looked over quickly.' },
    }),
    expected: labelerOnly(200),
  },
  {
    route: 'PATCH /api/passes/:id',
    prepare: async (app) => ({
      path: `/api/passes/${(await seedAssigned(app)).passId}`,
      body: { instructions: 'Begin with the last minute.' },
    }),
    expected: curatorOnly(200),
  },
  {
    route: 'GET /api/passes/:id/coverage',
    prepare: async (app) => ({ path: `/api/passes/${(await seedAssigned(app)).passId}/coverage` }),
    expected: signedIn(404, { labeler: 200, curator: 200 }),
  },
  {
    route: 'POST /api/passes/:id/coverage',
    prepare: async (app) => ({
      path: `/api/passes/${(await seedAssigned(app)).passId}/coverage`,
      body: { spans: [{ way: 'seen', channel: 0, startSample: 0, endSample: 9_600, detail: 8 }] },
    }),
    expected: labelerOnly(200),
  },
  {
    route: 'POST /api/passes/:id/cancel',
    prepare: async (app) => ({ path: `/api/passes/${(await seedAssigned(app)).passId}/cancel` }),
    expected: curatorOnly(200),
  },
  {
    route: 'GET /api/recordings/:id/events',
    state: 'shared',
    prepare: async (app) => ({ path: `/api/recordings/${(await seedAssigned(app)).recordingId}/events` }),
    expected: signedIn(200, { administrator: 404, removedMember: 404 }),
  },
  {
    route: 'GET /api/recordings/:id/events',
    state: 'held',
    prepare: async (app) => ({
      path: `/api/recordings/${await seedMeasured(app, { sharing: 'held' })}/events`,
    }),
    expected: signedIn(404, { contributor: 200, reviewer: 200 }),
  },
  {
    route: 'POST /api/recordings/:id/events',
    prepare: async (app) => {
      const { recordingId, passId } = await seedAssigned(app);
      return { path: `/api/recordings/${recordingId}/events`, body: markInput(passId) };
    },
    expected: labelerOnly(201),
  },
  {
    route: 'PUT /api/events/:id',
    state: 'new',
    prepare: async (app) => {
      const { recordingId, passId } = await seedAssigned(app);
      return { path: `/api/events/${uuidV7()}`, body: { ...markInput(passId), recordingId } };
    },
    expected: labelerOnly(200),
  },
  {
    route: 'PATCH /api/events/:id',
    state: 'of the labeler',
    prepare: async (app) => ({ ...(await markRequest(app)), body: { note: 'two in one' } }),
    expected: labelerOnly(200),
  },
  {
    route: 'PATCH /api/events/:id',
    state: 'of a recording held since',
    prepare: async (app) => ({ ...(await markRequest(app, true)), body: { note: 'two in one' } }),
    expected: signedIn(404),
  },
  {
    route: 'DELETE /api/events/:id',
    state: 'of the labeler',
    prepare: (app) => markRequest(app),
    expected: labelerOnly(204),
  },
  {
    route: 'GET /api/passes/:id/round',
    prepare: async (app) => ({ path: `/api/passes/${(await seedRound(app)).passId}/round` }),
    expected: labelerOnly(200),
  },
  {
    route: 'GET /api/passes/:id/round',
    state: 'of a blind pass',
    prepare: async (app) => ({ path: `/api/passes/${(await seedAssigned(app)).passId}/round` }),
    expected: labelerOnly(409),
  },
  {
    route: 'POST /api/candidates/:id/verdict',
    prepare: async (app) => {
      const { passId, candidateId, answer } = await answerRequest(app);
      return { path: `/api/candidates/${candidateId}/verdict`, body: { ...answer, passId } };
    },
    expected: labelerOnly(200),
  },
  {
    route: 'POST /api/passes/:id/verdicts',
    prepare: async (app) => {
      const { passId, candidateId, answer } = await answerRequest(app);
      return { path: `/api/passes/${passId}/verdicts`, body: { answers: [{ ...answer, candidateId }] } };
    },
    expected: labelerOnly(200),
  },
];
