import { byTime } from '@/composables/bench/mark.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';

/** Where a mark stands, or would stand, in a list that is in order of time. Cost: log2 of the length. */
export function placeOf(marks: readonly BenchMark[], mark: BenchMark): number {
  let low = 0;
  let high = marks.length;
  while (low < high) {
    const middle = (low + high) >> 1;
    if (byTime(marks[middle]!, mark) < 0) low = middle + 1;
    else high = middle;
  }
  return low;
}

/** The list with some marks in another form or gone: only those move, whatever its length. */
export function withChanges(
  marks: readonly BenchMark[],
  changes: readonly { before: BenchMark | undefined; after: BenchMark | null }[],
): BenchMark[] {
  const next = [...marks];
  for (const { before, after } of changes) {
    if (before) {
      const at = placeOf(next, before);
      if (next[at]?.key === before.key) next.splice(at, 1);
    }
    if (after) next.splice(placeOf(next, after), 0, after);
  }
  return next;
}
