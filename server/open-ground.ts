import { chmodSync, mkdirSync } from 'node:fs';
import path from 'node:path';
import type { Config } from './config.ts';
import { openMigratedDatabase } from './db/migrate.ts';
import type { Ground } from './ground.ts';
import { createActivityHub } from './jobs/activity.ts';
import { createJobQueue } from './jobs/queue.ts';
import { createLog } from './log.ts';
import { systemClock, systemIds } from './services/clock.ts';
import { loadKeys } from './services/key-file.ts';
import { createPasswordHasher } from './services/password-hasher.ts';
import { createDiskStore } from './store/disk-store.ts';

export interface OpenGround extends Ground {
  /** Runs what was asked for at the stop, then closes the database. */
  close(): Promise<void>;
}

/** The real ground: folders, keys, migrated database, store, queue. For the server and for commands. */
export async function openGround(config: Config): Promise<OpenGround> {
  makeFolders(config);
  const keys = loadKeys(config.paths.keys);
  const migrations = path.join(config.projectRoot, 'drizzle');
  const db = await openMigratedDatabase(
    path.join(config.paths.db, 'recalesce.sqlite'),
    migrations,
    systemClock.nowMs(),
  );
  const stopTasks: (() => Promise<void>)[] = [];
  return {
    config,
    keys,
    db,
    store: createDiskStore(config.paths.blobs),
    jobs: createJobQueue({ db, nowMs: systemClock.nowMs, nextId: systemIds.next }),
    activity: createActivityHub(),
    log: createLog(config.logLevel),
    clock: systemClock,
    ids: systemIds,
    hasher: createPasswordHasher(),
    onStop: (task) => stopTasks.push(task),
    close: async () => {
      await Promise.allSettled(stopTasks.map((task) => task()));
      db.$client.pragma('wal_checkpoint(TRUNCATE)');
      db.$client.close();
    },
  };
}

/** Recordings under a hold lie here: nobody else on the machine reads them. */
function makeFolders({ dataDir, paths }: Config): void {
  mkdirSync(dataDir, { recursive: true });
  chmodSync(dataDir, 0o700);
  for (const folder of Object.values(paths)) mkdirSync(folder, { recursive: true, mode: 0o700 });
}
