import { writeFileSync } from 'node:fs';
import { v7 as uuidV7 } from 'uuid';
import { barsBytes } from '../film-fixtures.ts';
import { phaseInput, seedPhase, seedPhasePass, seedRunOfRecording } from '../server/seed-phases.ts';
import { seedPass } from '../server/seed-recordings.ts';
import type { TestApp } from '../server/test-app.ts';
import { signedIn, type MatrixRow } from './matrix-row.ts';

const firstRevision = { 'If-Match': '"1"' };

async function sharedRun(app: TestApp, blind?: boolean): Promise<string> {
  const { runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' });
  if (blind !== undefined) seedPass(app, recordingId, { blind });
  return runId;
}

async function phaseRequest(app: TestApp, blind: boolean) {
  const runId = await sharedRun(app, blind);
  return { path: `/api/phases/${seedPhase(app, runId).id}`, headers: firstRevision };
}

async function phaseOfLabeler(app: TestApp) {
  const { runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' });
  const passId = seedPhasePass(app, recordingId);
  const made = app.deps.services.phases.create(app.actor('labeler'), runId, phaseInput({ passId }));
  return { path: `/api/phases/${made.id}`, headers: firstRevision };
}

async function filmRequest(app: TestApp, blind: boolean) {
  const runId = await sharedRun(app, blind);
  const { videos } = app.deps.services;
  const film = { path: app.deps.store.tempPath(), fileName: 'bars.webm' };
  writeFileSync(film.path, barsBytes('bars.webm'));
  const { id } = await videos.bringIn(app.actor('contributor'), runId, film);
  return { path: `/api/videos/${id}`, headers: firstRevision };
}

const readers = signedIn(200, { administrator: 404, removedMember: 404 });
const ofLab = (status: number) =>
  signedIn(403, { contributor: status, administrator: 404, removedMember: 404 });
/** An open phase of a pass is not shown to others, but to curators. */
const ofLabelerAlone = (status: number) => signedIn(404, { labeler: status, curator: 403 });

function runRows(tail: 'phases' | 'timeline' | 'videos'): MatrixRow[] {
  const route = `GET /api/runs/:id/${tail}`;
  return [
    {
      route,
      state: 'with a shared recording that the labeler was given',
      prepare: async (app) => ({ path: `/api/runs/${await sharedRun(app, true)}/${tail}` }),
      expected: readers,
    },
    {
      route,
      state: 'with a held recording',
      prepare: async (app) => {
        const { runId } = await seedRunOfRecording(app, { sharing: 'held' });
        return { path: `/api/runs/${runId}/${tail}` };
      },
      expected: signedIn(404, { contributor: 200, reviewer: 200 }),
    },
  ];
}

/** What lies beside the sound of a run. */
export const besideRows: MatrixRow[] = [
  ...runRows('phases'),
  ...runRows('timeline'),
  ...runRows('videos'),
  {
    route: 'POST /api/runs/:id/phases',
    state: 'as the lab',
    prepare: async (app) => ({
      path: `/api/runs/${await sharedRun(app, false)}/phases`,
      body: phaseInput(),
    }),
    expected: ofLab(201),
  },
  {
    route: 'POST /api/runs/:id/phases',
    state: 'in a pass for phases',
    prepare: async (app) => {
      const { runId, recordingId } = await seedRunOfRecording(app, { sharing: 'shared' });
      const passId = seedPhasePass(app, recordingId);
      return { path: `/api/runs/${runId}/phases`, body: phaseInput({ passId }) };
    },
    expected: signedIn(404, { labeler: 201 }),
  },
  {
    route: 'PUT /api/phases/:id',
    state: 'new, as the lab',
    prepare: async (app) => ({
      path: `/api/phases/${uuidV7()}`,
      body: { ...phaseInput(), runId: await sharedRun(app, false) },
    }),
    expected: ofLab(200),
  },
  {
    route: 'PATCH /api/phases/:id',
    state: 'told by the lab',
    prepare: async (app) => ({ ...(await phaseRequest(app, false)), body: { note: 'seen twice' } }),
    expected: ofLab(200),
  },
  {
    route: 'PATCH /api/phases/:id',
    state: 'of a run that the labeler marks blind',
    prepare: async (app) => ({ ...(await phaseRequest(app, true)), body: { note: 'seen twice' } }),
    expected: { ...ofLab(200), labeler: 404 },
  },
  {
    route: 'PATCH /api/phases/:id',
    state: 'marked by the labeler in an open pass',
    prepare: async (app) => ({ ...(await phaseOfLabeler(app)), body: { note: 'seen twice' } }),
    expected: ofLabelerAlone(200),
  },
  {
    route: 'DELETE /api/phases/:id',
    state: 'told by the lab',
    prepare: (app) => phaseRequest(app, false),
    expected: ofLab(204),
  },
  {
    route: 'POST /api/runs/:id/videos',
    state: 'with bytes that are no film',
    prepare: async (app) => ({
      path: `/api/runs/${await sharedRun(app, false)}/videos?fileName=a.mp4&peopleAgreed=true`,
      body: {},
    }),
    expected: ofLab(422),
  },
  {
    route: 'GET /api/videos/:id/film',
    prepare: async (app) => ({ path: `${(await filmRequest(app, false)).path}/film` }),
    expected: readers,
  },
  {
    route: 'GET /api/videos/:id/film',
    state: 'of a run that the labeler marks blind',
    prepare: async (app) => ({ path: `${(await filmRequest(app, true)).path}/film` }),
    expected: { ...readers, labeler: 404 },
  },
  {
    route: 'PATCH /api/videos/:id',
    prepare: async (app) => ({ ...(await filmRequest(app, false)), body: { runOffsetNs: 0 } }),
    expected: ofLab(200),
  },
  {
    route: 'DELETE /api/videos/:id',
    prepare: (app) => filmRequest(app, false),
    expected: ofLab(204),
  },
  {
    route: 'POST /api/videos/:id/restore',
    prepare: async (app) => {
      const { path } = await filmRequest(app, false);
      app.deps.services.videos.remove(app.actor('contributor'), path.slice('/api/videos/'.length), 1);
      return { path: `${path}/restore`, headers: { 'If-Match': '"2"' } };
    },
    expected: ofLab(200),
  },
];
