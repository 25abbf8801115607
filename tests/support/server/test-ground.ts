import { createHash } from 'node:crypto';
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import path from 'node:path';
import { readConfig } from '../../../server/config.ts';
import type { Ground } from '../../../server/ground.ts';
import { createActivityHub } from '../../../server/jobs/activity.ts';
import { createJobQueue } from '../../../server/jobs/queue.ts';
import { createLog } from '../../../server/log.ts';
import { systemIds } from '../../../server/services/clock.ts';
import { loadKeys } from '../../../server/services/key-file.ts';
import type { PasswordHasher } from '../../../server/services/password-hasher.ts';
import { createDiskStore } from '../../../server/store/disk-store.ts';
import { createFakeClock, type FakeClock } from './fake-clock.ts';
import { openMemoryDatabase, projectRoot } from './memory-database.ts';

export interface TestGround extends Ground {
  clock: FakeClock;
  close(): Promise<void>;
}

/** Real database, store and queue on a temporary folder; only time and password hashing are not the real ones. */
export function createTestGround(settings: Record<string, string> = {}): TestGround {
  const dataDir = mkdtempSync(path.join(tmpdir(), 'recalesce-test-'));
  const config = readConfig(
    { RECALESCE_DATA_DIR: dataDir, RECALESCE_LOG_LEVEL: 'silent', ...settings },
    projectRoot,
  );
  const clock = createFakeClock();
  const db = openMemoryDatabase();
  const stopTasks: (() => Promise<void>)[] = [];
  return {
    config,
    keys: loadKeys(config.paths.keys),
    db,
    store: createDiskStore(config.paths.blobs),
    jobs: createJobQueue({ db, nowMs: clock.nowMs, nextId: systemIds.next }),
    activity: createActivityHub(),
    log: createLog(config.logLevel),
    clock,
    ids: systemIds,
    hasher: cheapHasher,
    onStop: (task) => stopTasks.push(task),
    close: async () => {
      await Promise.all(stopTasks.map((task) => task()));
      db.$client.close();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
}

const digest = (text: string) => createHash('sha256').update(text).digest('hex');
const cheapHasher: PasswordHasher = {
  hash: async (password) => digest(password),
  verify: async (passwordHash, password) => passwordHash === digest(password),
};
