import { computed } from 'vue';
import type { ComputedRef } from 'vue';

/** Plain data that is worked out anew, but stays the same object as long as it says the same. */
export function sameWhileEqual<Value>(work: () => Value): ComputedRef<Value> {
  return computed<Value>((before) => {
    const now = work();
    return before !== undefined && JSON.stringify(before) === JSON.stringify(now) ? before : now;
  });
}
