import { scaleDescriptors, type CandidateDescriptors } from '../signal/look-alike-features.ts';
import type { LookAlikeGroup } from '../signal/look-alike-group.ts';
import { findLookAlikes } from '../signal/look-alikes.ts';

/** Groups look-alikes in a thread of its own: of a hundred thousand it takes a few seconds. */
export default function lookAlikesTask(descriptors: CandidateDescriptors): LookAlikeGroup[] {
  return findLookAlikes(scaleDescriptors(descriptors));
}
