import type { Deps } from './deps.ts';
import type { JobHandler } from './jobs/registry.ts';

/** Every kind of job; a kind that is not here stays in the queue. */
export function allJobs(_deps: Deps): JobHandler[] {
  return [];
}
