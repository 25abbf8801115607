import type { MarkFields } from '@/composables/bench/mark.ts';
import { holdsAll, mergeFields } from '@/composables/outbox/merge-fields.ts';

/**
 * What a mark becomes when one change of it is taken back or done again. Only the fields of that change move, so that what
 * another window changed since stays. `undefined` where that is not possible without undoing the other's change too.
 */
export function takeBack(
  present: MarkFields | null,
  from: MarkFields | null,
  to: MarkFields | null,
): MarkFields | null | undefined {
  if (!present || !from) return present === from ? to : undefined;
  if (!to) return holdsAll({ ...present }, { ...from }) ? null : undefined;
  const { merged, clashes } = mergeFields({ base: { ...from }, mine: to, theirs: present });
  return clashes.length > 0 ? undefined : merged;
}
