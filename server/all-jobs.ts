import type { Deps } from './deps.ts';
import { recordingsJobs } from './features/recordings/recordings.jobs.ts';
import type { JobHandler } from './jobs/registry.ts';

/** Every kind of job; a kind that is not here stays in the queue. */
export function allJobs(deps: Deps): JobHandler[] {
  return [...recordingsJobs(deps)];
}
