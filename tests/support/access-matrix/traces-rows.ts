import { seedPass, seedRecording, seedRun } from '../server/seed-recordings.ts';
import { seedTrace } from '../server/seed-traces.ts';
import type { TestApp } from '../server/test-app.ts';
import { signedIn, type MatrixRow } from './matrix-row.ts';

const firstRevision = { 'If-Match': '"1"' };
type Setting = 'private' | 'shared' | 'blind' | 'open';

/** A run with a trace: nothing shared, shared, or shared and given to the labeler, blind or open. */
async function runWithTrace(app: TestApp, setting: Setting) {
  if (setting === 'private') {
    const { id } = seedRun(app);
    return { runId: id, traceId: (await seedTrace(app, id)).id };
  }
  const recordingId = await seedRecording(app, { sharing: 'shared' });
  const { runId } = app.deps.services.recordings.get(app.actor('contributor'), recordingId);
  const traceId = (await seedTrace(app, runId)).id;
  if (setting !== 'shared') seedPass(app, recordingId, { blind: setting === 'blind' });
  return { runId, traceId };
}

const whoReads: Record<Setting, MatrixRow['expected']> = {
  private: signedIn(404, { contributor: 200, reviewer: 200 }),
  shared: signedIn(200, { labeler: 404, administrator: 404, removedMember: 404 }),
  blind: signedIn(200, { labeler: 404, administrator: 404, removedMember: 404 }),
  open: signedIn(200, { administrator: 404, removedMember: 404 }),
};
const states: Record<Setting, string> = {
  private: 'nothing of the run is shared',
  shared: 'with a shared recording',
  blind: 'with a shared recording that the labeler marks blind',
  open: 'with a shared recording that the labeler marks openly',
};

function readRows(suffix: string): MatrixRow[] {
  return (Object.keys(states) as Setting[]).map((setting) => ({
    route: `GET /api/traces/:id${suffix}`,
    state: states[setting],
    prepare: async (app) => ({ path: `/api/traces/${(await runWithTrace(app, setting)).traceId}${suffix}` }),
    expected: whoReads[setting],
  }));
}

const onlyTheLab = (status: number) => signedIn(404, { contributor: status, reviewer: 403 });

export const tracesRows: MatrixRow[] = [
  ...readRows(''),
  ...readRows('/points'),
  ...readRows('/recalescence'),
  ...readRows('/file'),
  {
    route: 'GET /api/runs/:id/traces',
    state: 'nothing of the run is shared',
    prepare: async (app) => ({ path: `/api/runs/${(await runWithTrace(app, 'private')).runId}/traces` }),
    expected: whoReads.private,
  },
  {
    route: 'GET /api/runs/:id/traces',
    state: 'with a shared recording that the labeler marks blind',
    prepare: async (app) => ({ path: `/api/runs/${(await runWithTrace(app, 'blind')).runId}/traces` }),
    expected: whoReads.open,
  },
  {
    route: 'POST /api/runs/:id/traces',
    state: 'with a body that is no form',
    prepare: (app) => ({ path: `/api/runs/${seedRun(app).id}/traces`, body: {} }),
    expected: onlyTheLab(415),
  },
  {
    route: 'PATCH /api/traces/:id',
    prepare: async (app) => ({
      path: `/api/traces/${(await runWithTrace(app, 'private')).traceId}`,
      body: { runOffsetNs: -5 },
      headers: firstRevision,
    }),
    expected: onlyTheLab(200),
  },
  {
    route: 'DELETE /api/traces/:id',
    prepare: async (app) => ({
      path: `/api/traces/${(await runWithTrace(app, 'private')).traceId}`,
      headers: firstRevision,
    }),
    expected: onlyTheLab(204),
  },
  {
    route: 'POST /api/traces/:id/restore',
    prepare: async (app) => {
      const { traceId } = await runWithTrace(app, 'private');
      app.deps.services.traces.remove(app.actor('contributor'), traceId, 1);
      return { path: `/api/traces/${traceId}/restore`, headers: { 'If-Match': '"2"' } };
    },
    expected: signedIn(404, { contributor: 200 }),
  },
];
