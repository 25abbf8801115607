import { join } from 'node:path';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { setTimeout as wait } from 'node:timers/promises';
import {
  candidateOverviewQuerySchema,
  listCandidatesQuerySchema,
} from '../../../shared/contract/candidates.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Db } from '../../../server/db/client.ts';
import { openMigratedDatabase } from '../../../server/db/migrate.ts';
import { write } from '../../../server/db/transaction.ts';
import { createCandidatesService } from '../../../server/features/recordings/candidates.service.ts';
import {
  insertCandidates,
  insertDetectorRun,
} from '../../../server/features/recordings/measurement.queries.ts';
import type { MeasuredAccess } from '../../../server/features/recordings/recording-views.service.ts';
import { systemIds } from '../../../server/services/clock.ts';
import { manyCandidates } from '../../support/server/seed-candidates.ts';
import { projectRoot } from '../kit/places.ts';
import { writeFindings } from './write-findings.ts';

// What lists of one recording cost beside others in a database file. Arguments: folder, recordings, candidates of each.
const [folder = '', recordings = '1', many = '0'] = process.argv.slice(2);
const COUNT = Number(many);
const SAMPLE_RATE_HZ = 192_000;
const FRAMES = 3600 * SAMPLE_RATE_HZ;
const STEP = 10_000;
const TRIES = 7;

/** The recordings are not looked up, so that none has to be made. */
function fill(db: Db): void {
  db.$client.pragma('foreign_keys = OFF');
  const found = manyCandidates({ count: COUNT, frames: FRAMES, sampleRateHz: SAMPLE_RATE_HZ, channels: 4 });
  for (let recording = 0; recording < Number(recordings); recording++) {
    const run = `run-${recording}`;
    const owner = { recordingId: 'recording', measurementId: `measurement-${recording}` };
    const detector = { detectorVersion: '1', settings: {}, createdAtMs: recording };
    insertDetectorRun(db, { id: run, ...owner, ...detector, candidateCount: COUNT });
    for (let from = 0; from < COUNT; from += STEP) {
      const rows = found
        .slice(from, from + STEP)
        .map((parameters, index) => ({ id: systemIds.next(), ordinal: from + index, parameters }));
      write(db, () => insertCandidates(db, run, rows));
    }
  }
}

interface Cost {
  wallMs: number;
  cpuMs: number;
  /** For how long nothing else was answered. */
  heldMs: number;
}

async function costOf(work: () => Promise<unknown>): Promise<Cost> {
  const delay = monitorEventLoopDelay({ resolution: 1 });
  await wait(20);
  delay.enable();
  const before = process.cpuUsage();
  const startedMs = performance.now();
  await work();
  const wallMs = performance.now() - startedMs;
  const { user, system } = process.cpuUsage(before);
  await wait(5);
  delay.disable();
  return { wallMs, cpuMs: (user + system) / 1000, heldMs: delay.max / 1e6 };
}

async function median(work: () => Promise<unknown>): Promise<Cost> {
  const costs: Cost[] = [];
  for (let n = 0; n < TRIES; n++) costs.push(await costOf(work));
  const middle = (key: keyof Cost) => costs.map((cost) => cost[key]).sort((a, b) => a - b)[TRIES >> 1]!;
  return { wallMs: middle('wallMs'), cpuMs: middle('cpuMs'), heldMs: middle('heldMs') };
}

const db = await openMigratedDatabase(join(folder, 'lists.db'), join(projectRoot, 'drizzle'), 0);
fill(db);
const access = {
  row: { format: { frames: FRAMES, sampleRateHz: SAMPLE_RATE_HZ } },
  blind: false,
  isSoundWithheld: false,
  measurementId: `measurement-${Number(recordings) >> 1}`,
} as MeasuredAccess;
const makeService = () => createCandidatesService({ db, recordingViews: { requireMeasured: () => access } });
const kept = makeService();
const actor = {} as Actor;
const list = (query: object, service = kept) =>
  service.list(actor, '', listCandidatesQuerySchema.parse({ limit: 100, ...query }));
const aSecond = { startSample: FRAMES / 2, endSample: FRAMES / 2 + SAMPLE_RATE_HZ };

writeFindings({
  byOnset: await median(() => list({})),
  lastByOnset: await median(() => list({ rank: COUNT - 100 })),
  byStrength: await median(() => list({ sort: '-snrDb' }, makeService())),
  byStrengthKept: await median(() => list({ sort: '-snrDb', rank: COUNT >> 1 })),
  filtered: await median(() =>
    list({ sort: '-snrDb', hearingClass: 'above', leastSnrDb: 20 }, makeService()),
  ),
  window: await median(() => list({ ...aSecond, limit: 500 }, makeService())),
  overview: await median(() => kept.overview(actor, '', candidateOverviewQuerySchema.parse({}))),
});
db.$client.close();
