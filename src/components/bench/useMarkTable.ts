import { computed, ref } from 'vue';
import type { BenchMark } from '@/composables/bench/mark.ts';
import type { MarkColumn } from '@/components/bench/mark-columns.ts';

export interface MarkSort {
  key: string;
  isFalling: boolean;
}

/** By a fact; those without it stand last, and what is equal stays in order of time. */
export function sortMarks(
  marks: readonly BenchMark[],
  { order }: Pick<MarkColumn, 'order'>,
  isFalling: boolean,
): BenchMark[] {
  const keyed = marks.map((mark) => ({ mark, value: order(mark) }));
  const sign = isFalling ? -1 : 1;
  keyed.sort((a, b) => {
    if (a.value === null || b.value === null) return Number(a.value === null) - Number(b.value === null);
    return a.value < b.value ? -sign : a.value > b.value ? sign : 0;
  });
  return keyed.map(({ mark }) => mark);
}

/** The marks as the table shows them: of one class or all, in an order. `marks` are in order of time. */
export function useMarkTable(marks: () => readonly BenchMark[], columns: () => readonly MarkColumn[]) {
  const sort = ref<MarkSort>({ key: 'onset', isFalling: false });
  const classKey = ref('');

  /** A class that no mark has any more is no choice: all are shown again. */
  const filtered = computed(() => {
    const some = marks().filter((mark) => mark.classKey === classKey.value);
    return some.length === 0 ? marks() : some;
  });
  const shown = computed(() => {
    const { key, isFalling } = sort.value;
    const column = columns().find((one) => one.key === key);
    const isInOrder = key === 'onset' && !isFalling;
    return isInOrder || !column ? filtered.value : sortMarks(filtered.value, column, isFalling);
  });

  /** The same heading again turns the order around. */
  function sortBy(key: string): void {
    const { key: present, isFalling } = sort.value;
    sort.value = { key, isFalling: key === present && !isFalling };
  }

  return { sort, classKey, shown, sortBy };
}
