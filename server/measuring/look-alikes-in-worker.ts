import type { CandidateDescriptors } from '../signal/look-alike-features.ts';
import type { LookAlikeGroup } from '../signal/look-alike-group.ts';
import lookAlikesTask from './look-alikes.worker.ts';

/** What this needs of a pool of threads. */
export interface LookAlikesPool {
  run(descriptors: CandidateDescriptors): Promise<LookAlikeGroup[]>;
}

/** Address of the worker without its ending, for the pool. */
export const lookAlikesWorkerModule = new URL('./look-alikes.worker', import.meta.url);

/** So few are grouped in less time than a thread needs to start. */
const fewCandidates = 200;

/** Groups of look-alikes, in a thread of `pool` where that takes time. */
export async function findLookAlikesIn(
  pool: LookAlikesPool,
  descriptors: CandidateDescriptors,
): Promise<LookAlikeGroup[]> {
  const count = descriptors.snrDb.length;
  return count <= fewCandidates ? lookAlikesTask(descriptors) : pool.run(descriptors);
}
