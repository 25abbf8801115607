import type { Config } from './config.ts';
import type { Db } from './db/client.ts';
import type { ActivityHub } from './jobs/activity.ts';
import type { JobQueue } from './jobs/queue.ts';
import type { Logger } from './log.ts';
import type { Clock, IdSource } from './services/clock.ts';
import type { Keys } from './services/key-file.ts';
import type { PasswordHasher } from './services/password-hasher.ts';
import type { BlobStore } from './store/blob-store.ts';

/** What every feature may stand on; made once at the start, or with fakes in a test. */
export interface Ground {
  config: Config;
  keys: Keys;
  db: Db;
  store: BlobStore;
  jobs: JobQueue;
  activity: ActivityHub;
  log: Logger;
  clock: Clock;
  ids: IdSource;
  hasher: PasswordHasher;
  /** Something to end before the process does, for example a pool of workers. */
  onStop(task: () => Promise<void>): void;
}
