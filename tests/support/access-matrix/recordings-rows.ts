import { updateRecording } from '../../../server/features/recordings/recordings.queries.ts';
import { seedMeasured, seedPass, seedRecording, type SeedRecording } from '../server/seed-recordings.ts';
import type { TestApp } from '../server/test-app.ts';
import { signedIn, type MatrixRow } from './matrix-row.ts';

/** Shared, measured, and given to the labeler in a blind pass. */
async function assignedId(app: TestApp, seed: SeedRecording = { sharing: 'shared' }): Promise<string> {
  const id = await seedMeasured(app, seed);
  seedPass(app, id);
  return id;
}

async function failedId(app: TestApp): Promise<string> {
  const id = await seedRecording(app);
  updateRecording(app.deps.db, id, { processing: 'failed', failure: 'The disk was full.' });
  return id;
}

async function queuedId(app: TestApp): Promise<string> {
  const id = await seedRecording(app);
  updateRecording(app.deps.db, id, { processing: 'queued', progress: 0 });
  return id;
}

const sharedAndAssigned = signedIn(200, { administrator: 404, removedMember: 404 });
const withheldFromBlind = { ...sharedAndAssigned, labeler: 404 };
const ownLabOnly = signedIn(404, { contributor: 200, reviewer: 200 });

/** The same route before and after sharing; a pass shows nothing of what is held. */
function readingRows(route: string, tail: string, shared = sharedAndAssigned): MatrixRow[] {
  return [
    {
      route,
      state: 'shared, and given to the labeler in a blind pass',
      prepare: async (app) => ({ path: `/api/recordings/${await assignedId(app)}${tail}` }),
      expected: shared,
    },
    {
      route,
      state: 'held',
      prepare: async (app) => ({
        path: `/api/recordings/${await assignedId(app, { sharing: 'held' })}${tail}`,
      }),
      expected: ownLabOnly,
    },
  ];
}

export const recordingsRows: MatrixRow[] = [
  {
    route: 'GET /api/recordings',
    prepare: () => ({ path: '/api/recordings' }),
    expected: signedIn(200),
  },
  {
    route: 'GET /api/recordings/:id',
    state: 'shared, given to nobody',
    prepare: async (app) => ({ path: `/api/recordings/${await seedRecording(app, { sharing: 'shared' })}` }),
    expected: signedIn(200, { labeler: 404, administrator: 404, removedMember: 404 }),
  },
  ...readingRows('GET /api/recordings/:id', ''),
  ...readingRows('GET /api/recordings/:id/audio', '/audio'),
  ...readingRows('GET /api/recordings/:id/segments', '/segments'),
  ...readingRows('GET /api/recordings/:id/candidates', '/candidates', withheldFromBlind),
  ...readingRows('GET /api/recordings/:id/candidates/overview', '/candidates/overview', withheldFromBlind),
  ...readingRows('GET /api/recordings/:id/candidates.csv', '/candidates.csv', withheldFromBlind),
  ...readingRows('GET /api/recordings/:id/candidates.jsonl', '/candidates.jsonl', withheldFromBlind),
  ...readingRows('GET /api/recordings/:id/peaks', '/peaks?points=10'),
  ...readingRows('GET /api/recordings/:id/spectrogram/layout', '/spectrogram/layout'),
  ...readingRows('GET /api/recordings/:id/spectrogram/:band/:level/:tile', '/spectrogram/ultrasonic/1/0'),
  ...readingRows('GET /api/recordings/:id/spectrogram/quiet', '/spectrogram/quiet'),
  ...readingRows('GET /api/recordings/:id/onset', '/onset?startSample=100&endSample=2000'),
  ...readingRows('GET /api/recordings/:id/region', '/region?startSample=100&endSample=2000'),
  ...readingRows('GET /api/recordings/:id/spectrum', '/spectrum'),
  ...readingRows('GET /api/recordings/:id/frames.csv', '/frames.csv', withheldFromBlind),
  ...readingRows('GET /api/recordings/:id/listen', '/listen?startSample=0&endSample=4800&slow=2'),
  ...readingRows('GET /api/recordings/:id/quiet-span', '/quiet-span'),
  {
    route: 'POST /api/recordings/:id/measure',
    state: 'after a measurement that failed',
    prepare: async (app) => ({ path: `/api/recordings/${await failedId(app)}/measure` }),
    expected: signedIn(404, { contributor: 202, reviewer: 403 }),
  },
  {
    route: 'DELETE /api/recordings/:id/measure',
    state: 'while it waits to be measured',
    prepare: async (app) => ({ path: `/api/recordings/${await queuedId(app)}/measure` }),
    expected: signedIn(404, { contributor: 200, reviewer: 403 }),
  },
];
