import { mkdirSync } from 'node:fs';
import { setTimeout as pause } from 'node:timers/promises';
import { allJobs } from '../all-jobs.ts';
import { ConfigError, processConfig, type Config } from '../config.ts';
import { createDeps, type Deps } from '../deps.ts';
import { createJobRunner } from '../jobs/runner.ts';
import { openGround } from '../open-ground.ts';
import { seedFilms } from './demo/seed-films.ts';
import { seedPhases } from './demo/seed-phases.ts';
import { seedMarks } from './demo/seed-marks.ts';
import { renewPasswords, seedPeople } from './demo/seed-people.ts';
import { seedRecordings } from './demo/seed-recordings.ts';
import { seedReleases } from './demo/seed-releases.ts';
import { seedTraces } from './demo/seed-traces.ts';
import { findSeedState, markSeeded, markSeedingBegun } from './demo/seed-state.ts';

/* Fills an empty data folder with the demo scenario; does nothing but renew the passwords where it is there already. */

const measureAtOnce = 2;

async function seedDemo(): Promise<void> {
  const config = { ...processConfig(), measureWorkers: measureAtOnce };
  const { demoPassword } = config;
  if (!config.demo || demoPassword === null)
    throw new ConfigError(['The demo data need RECALESCE_DEMO=1 and a RECALESCE_DEMO_PASSWORD.']);
  const state = findSeedState(config);
  if (state === 'foreign')
    throw new ConfigError([
      `${config.dataDir} holds data that are not of the demo. Choose another RECALESCE_DATA_DIR.`,
    ]);
  mkdirSync(config.dataDir, { recursive: true, mode: 0o700 });
  if (state === 'empty') markSeedingBegun(config);
  await withDeps(config, (deps) =>
    state === 'seeded' ? renewPasswords(deps, demoPassword) : fill(deps, demoPassword),
  );
  if (state === 'empty') markSeeded(config);
}

async function withDeps(config: Config, work: (deps: Deps) => Promise<void>): Promise<void> {
  const ground = await openGround(config);
  try {
    await work(createDeps(ground));
  } finally {
    await ground.close();
  }
}

async function fill(deps: Deps, password: string): Promise<void> {
  const lanes = { compute: measureAtOnce, light: 1 };
  const runner = createJobRunner({ queue: deps.jobs, handlers: allJobs(deps), log: deps.log, lanes });
  runner.start();
  try {
    const people = await seedPeople(deps, password);
    const recordingIds = await seedRecordings(deps, people);
    seedPhases(deps, people, recordingIds);
    await seedFilms(deps, people, recordingIds);
    await untilIdle(deps);
    await seedTraces(deps, people, recordingIds);
    await seedMarks(deps, people, recordingIds);
    await seedReleases(deps, people, recordingIds, () => untilIdle(deps));
  } finally {
    await runner.stop(5000);
  }
}

async function untilIdle({ jobs }: Deps): Promise<void> {
  for (let counts = jobs.counts(); counts.queued + counts.running > 0; counts = jobs.counts())
    await pause(100);
  if (jobs.counts().parked > 0) throw new Error('A job of the demo failed; the lines above say why.');
}

try {
  await seedDemo();
} catch (error) {
  const sentences = error instanceof ConfigError ? error.sentences.join('\n') : error;
  console.error(sentences);
  process.exitCode = 1;
}
