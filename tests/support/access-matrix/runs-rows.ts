import type { TestApp } from '../server/test-app.ts';
import { runInput, seedPass, seedRecording, seedRun, seedSetup } from '../server/seed-recordings.ts';
import { signedIn, type MatrixRow } from './matrix-row.ts';

const sensorOf = (labId: string) => ({ labId, name: 'Disc sensor', kind: 'contact-ae' });
const firstRevision = { 'If-Match': '"1"' };

async function sharedRunId(app: TestApp, assigned: boolean): Promise<string> {
  const recordingId = await seedRecording(app, { sharing: 'shared' });
  if (assigned) seedPass(app, recordingId);
  return app.deps.services.recordings.get(app.actor('contributor'), recordingId).runId;
}

export const runsRows: MatrixRow[] = [
  {
    route: 'GET /api/runs',
    prepare: () => ({ path: '/api/runs' }),
    expected: signedIn(200),
  },
  {
    route: 'POST /api/runs',
    prepare: (app) => ({ path: '/api/runs', body: runInput(app.ownLabId) }),
    expected: signedIn(403, { contributor: 201, otherContributor: 422 }),
  },
  {
    route: 'GET /api/runs/:id',
    state: 'nothing of it is shared',
    prepare: (app) => ({ path: `/api/runs/${seedRun(app).id}` }),
    expected: signedIn(404, { contributor: 200, reviewer: 200 }),
  },
  {
    route: 'GET /api/runs/:id',
    state: 'with a shared recording',
    prepare: async (app) => ({ path: `/api/runs/${await sharedRunId(app, false)}` }),
    expected: signedIn(200, { labeler: 404, administrator: 404, removedMember: 404 }),
  },
  {
    route: 'GET /api/runs/:id',
    state: 'with a shared recording that the labeler was given',
    prepare: async (app) => ({ path: `/api/runs/${await sharedRunId(app, true)}` }),
    expected: signedIn(200, { administrator: 404, removedMember: 404 }),
  },
  {
    route: 'PUT /api/runs/:id',
    prepare: (app) => ({
      path: `/api/runs/${seedRun(app).id}`,
      body: runInput(app.ownLabId, 'Another title'),
      headers: firstRevision,
    }),
    expected: signedIn(404, { contributor: 200, reviewer: 403 }),
  },
  {
    route: 'GET /api/sensors',
    prepare: () => ({ path: '/api/sensors' }),
    expected: signedIn(200),
  },
  {
    route: 'POST /api/sensors',
    prepare: (app) => ({ path: '/api/sensors', body: sensorOf(app.ownLabId) }),
    expected: signedIn(403, { contributor: 201, otherContributor: 422 }),
  },
  {
    route: 'PUT /api/sensors/:id',
    prepare: (app) => ({
      path: `/api/sensors/${seedSetup(app).sensorId}`,
      body: sensorOf(app.ownLabId),
      headers: firstRevision,
    }),
    expected: signedIn(404, { contributor: 200, reviewer: 403 }),
  },
  {
    route: 'GET /api/setups',
    prepare: () => ({ path: '/api/setups' }),
    expected: signedIn(200),
  },
  {
    route: 'POST /api/setups',
    prepare: (app) => ({
      path: '/api/setups',
      body: { sensorId: seedSetup(app).sensorId, name: 'Beside the plate' },
    }),
    expected: signedIn(403, { contributor: 201, otherContributor: 422 }),
  },
  {
    route: 'PUT /api/setups/:id',
    prepare: (app) => {
      const { id, sensorId } = seedSetup(app);
      return { path: `/api/setups/${id}`, body: { sensorId, name: 'Moved' }, headers: firstRevision };
    },
    expected: signedIn(404, { contributor: 200, reviewer: 403 }),
  },
];
