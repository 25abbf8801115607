import { mkdtempSync, rmSync, statSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { monitorEventLoopDelay } from 'node:perf_hooks';
import { setTimeout as wait } from 'node:timers/promises';
import {
  candidateOverviewQuerySchema,
  candidateSortSchema,
  listCandidatesQuerySchema,
} from '../../shared/contract/candidates.ts';
import type { Actor } from '../../shared/policy/actor.ts';
import { openMigratedDatabase } from '../../server/db/migrate.ts';
import { createCandidatesService } from '../../server/features/recordings/candidates.service.ts';
import { insertCandidates } from '../../server/features/recordings/measurement.queries.ts';
import type { MeasuredAccess } from '../../server/features/recordings/recording-views.service.ts';
import { systemIds } from '../../server/services/clock.ts';
import { manyCandidates } from '../support/server/seed-candidates.ts';

// Prints what lists of one recording with 100,000 candidates cost beside many others in a database on disk: CPU and wall
// time, and for how long nothing else was answered. Run: npx tsx tests/bench/candidate-list.ts [recordings, or 20]
const recordings = Number(process.argv[2] ?? 20);
const count = 100_000;
const sampleRateHz = 192_000;
const frames = 3600 * sampleRateHz;
const rowsPerStep = 10_000;
const projectRoot = path.resolve(import.meta.dirname, '../..');

const folder = mkdtempSync(path.join(tmpdir(), 'recalesce-bench-'));
try {
  await main(path.join(folder, 'bench.sqlite'));
} finally {
  rmSync(folder, { recursive: true, force: true });
}

async function main(file: string): Promise<void> {
  const db = await openMigratedDatabase(file, path.join(projectRoot, 'drizzle'), Date.now());
  // Runs of the detector without recordings: what is measured here reads none of them.
  db.$client.pragma('foreign_keys = OFF');
  const found = manyCandidates({ count, frames, sampleRateHz, channels: 4 });
  const startedMs = performance.now();
  for (let recording = 0; recording < recordings; recording++) {
    db.$client
      .prepare("insert into detector_runs values (?, 'r', ?, '1', '{}', ?, ?)")
      .run(`run-${recording}`, `measurement-${recording}`, count, recording);
    for (let from = 0; from < count; from += rowsPerStep) {
      const part = found.slice(from, from + rowsPerStep);
      const rows = part.map((parameters, index) => ({
        id: systemIds.next(),
        ordinal: from + index,
        parameters,
      }));
      db.$client.transaction(() => insertCandidates(db, `run-${recording}`, rows))();
    }
  }
  const seconds = (performance.now() - startedMs) / 1000;
  const megabytes = statSync(file).size / 1e6;
  const rows = recordings * count;
  say(
    `${rows} rows in ${seconds.toFixed(0)} s, ${(rows / seconds).toFixed(0)} per second, ${megabytes.toFixed(0)} MB`,
  );
  await measureLists(db);
  db.$client.close();
}

async function measureLists(db: Parameters<typeof insertCandidates>[0]): Promise<void> {
  const measurementId = `measurement-${recordings >> 1}`;
  const access = { row: { format: { frames, sampleRateHz } }, blind: false, measurementId } as MeasuredAccess;
  const make = () => createCandidatesService({ db, recordingViews: { requireMeasured: () => access } });
  const service = make();
  const actor = {} as Actor;
  const list = (query: object, of = service) => of.list(actor, '', listCandidatesQuerySchema.parse(query));
  await report('first rows by onset', () => list({ limit: 100 }));
  await report('rows from rank 99,900 by onset', () => list({ limit: 100, rank: 99_900 }));
  for (const sort of candidateSortSchema.options) {
    await report(`first rows by ${sort}, order not kept yet`, () => list({ sort, limit: 100 }, make()));
  }
  await report('rows from rank 50,000 by -snrDb, order kept', () =>
    list({ sort: '-snrDb', limit: 100, rank: 50_000 }),
  );
  await report('above the line, at least 20 dB, by -snrDb', () =>
    list({ sort: '-snrDb', hearingClass: 'above', leastSnrDb: 20, limit: 100 }, make()),
  );
  await report('500 rows of the last second', () =>
    list({ startSample: frames - sampleRateHz, endSample: frames, limit: 500 }, make()),
  );
  await report('overview', () => service.overview(actor, '', candidateOverviewQuerySchema.parse({})));
  await report(
    'every candidate, one by one',
    async () => {
      let seen = 0;
      for await (const _one of service.each(service.requireShown(actor, ''), {})) seen++;
      return seen;
    },
    1,
  );
}

async function report(name: string, work: () => Promise<unknown>, tries = 7): Promise<void> {
  const delay = monitorEventLoopDelay({ resolution: 1 });
  const taken: { cpuMs: number; wallMs: number; heldMs: number }[] = [];
  for (let n = 0; n < tries; n++) {
    await wait(20);
    delay.reset();
    delay.enable();
    const before = process.cpuUsage();
    const startedMs = performance.now();
    await work();
    const wallMs = performance.now() - startedMs;
    const { user, system } = process.cpuUsage(before);
    await wait(5);
    delay.disable();
    taken.push({ cpuMs: (user + system) / 1000, wallMs, heldMs: delay.max / 1e6 });
  }
  const { cpuMs, wallMs, heldMs } = taken.sort((a, b) => a.wallMs - b.wallMs)[tries >> 1]!;
  say(`${name.padEnd(48)} ${column(cpuMs)} ms CPU ${column(wallMs)} ms, longest hold ${column(heldMs)} ms`);
}

function column(value: number): string {
  return value.toFixed(1).padStart(8);
}

function say(text: string): void {
  process.stdout.write(`${text}\n`);
}
