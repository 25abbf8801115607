import type { Deps } from './deps.ts';
import { recordingsJobs } from './features/recordings/recordings.jobs.ts';
import { buildReleaseJob } from './features/releases/releases.jobs.ts';
import type { JobHandler } from './jobs/registry.ts';

/** Every kind of job; a kind that is not here stays in the queue. */
export function allJobs(deps: Deps): JobHandler[] {
  const { audit, archivePool } = deps.services;
  return [...recordingsJobs(deps), buildReleaseJob({ ...deps, audit, pool: archivePool })];
}
