import { sql } from 'drizzle-orm';
import type { Health } from '../../../shared/contract/health.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { freeBytesAt } from '../../store/free-space.ts';

/** Below this, new bytes are refused so that marks and decisions can still be written. */
export const freeSpaceFloorBytes = 1024 ** 3;

export type HealthService = ReturnType<typeof createHealthService>;

export function createHealthService({
  config,
  db,
  jobs,
  log,
}: Pick<Ground, 'config' | 'db' | 'jobs' | 'log'>) {
  async function read(actor: Actor | null): Promise<Health> {
    const database = isDatabaseUsable() ? 'ok' : 'failed';
    const freeBytes = await freeBytesAt(config.dataDir);
    const counts = database === 'ok' ? jobs.counts() : { queued: 0, running: 0, parked: 0 };
    const disk = freeBytes >= freeSpaceFloorBytes ? 'ok' : 'low';
    return {
      status: database === 'ok' && disk === 'ok' ? 'ok' : 'degraded',
      database,
      disk,
      jobs: counts.parked > 0 ? 'parked' : 'ok',
      details: actor?.roles.includes('administrator') === true ? { freeBytes, jobs: counts } : null,
    };
  }

  function isDatabaseUsable(): boolean {
    try {
      db.get(sql`select 1`);
      return true;
    } catch (error) {
      log.error({ err: error }, 'the database does not answer');
      return false;
    }
  }

  return { read };
}
