import { nextTick, ref, watch } from 'vue';
import type { Ref } from 'vue';
import type { MarkColumn } from '@/components/bench/mark-columns.ts';
import type { MarkGrid } from '@/components/bench/useMarkGrid.ts';
import { useBenchHere } from '@/composables/bench/bench-context.ts';
import type { BenchMark } from '@/composables/bench/mark.ts';

export interface MarkRowsParts {
  /** As the table shows them. */
  shown: Ref<readonly BenchMark[]>;
  grid: MarkGrid;
  columns: Ref<readonly MarkColumn[]>;
  sortBy: (key: string) => void;
  frame: Readonly<Ref<HTMLElement | null>>;
}

/** What pointer and keys do in the table of marks: take one up, or several; sort; choose a class or confidence in its cell. */
export function useMarkRows({ shown, grid, columns, sortBy, frame }: MarkRowsParts) {
  const bench = useBenchHere();
  const { marks } = bench;
  const { selectedKey, selectedKeys } = marks;
  const { cell } = grid;
  const editing = ref<{ key: string; column: string } | null>(null);

  /** From the mark in hand to this one, as the table is sorted. */
  function selectTo(row: number): void {
    const keys = shown.value.map(({ key }) => key);
    const from = keys.indexOf(selectedKey.value ?? '');
    const [first, last] = [Math.min(from < 0 ? row - 1 : from, row - 1), Math.max(from, row - 1)];
    const range = keys.slice(first, last + 1);
    marks.selectMany([...selectedKeys.value, ...range], keys[row - 1] ?? null);
  }

  function takeRow(row: number, how: { isRange: boolean; isMore: boolean }): void {
    const mark = shown.value[row - 1];
    if (!mark) return;
    if (how.isRange) selectTo(row);
    else if (how.isMore) marks.toggle(mark.key);
    else bench.selectMark(mark.key);
  }

  function click(event: MouseEvent, row: number): void {
    const target = event.target instanceof Element ? event.target.closest<HTMLElement>('[data-cell]') : null;
    grid.wanted.value = { row, column: Number(target?.dataset.cell?.split(':')[1] ?? 0) };
    takeRow(row, { isRange: event.shiftKey, isMore: event.ctrlKey || event.metaKey });
  }

  /** Keys that do more than move; what they do not know is left to the bench. */
  function act(event: KeyboardEvent): boolean {
    const { row, column } = cell.value;
    if (event.key === 'Enter' || event.key === 'F2') enter(row, columns.value[column]?.key ?? '');
    else if (event.code === 'KeyA' && event.ctrlKey && !event.shiftKey)
      marks.selectMany(
        shown.value.map(({ key }) => key),
        selectedKey.value ?? shown.value.at(-1)?.key ?? null,
      );
    else if (event.code === 'Space' && event.ctrlKey) takeRow(row, { isRange: false, isMore: true });
    else return false;
    return true;
  }

  function press(event: KeyboardEvent): void {
    if (event.altKey || event.metaKey) return;
    const next = grid.afterKey(event);
    if (!next && !act(event)) return;
    event.preventDefault();
    if (!next) return;
    const isAcross = next.row === cell.value.row;
    void grid.focusCell(next);
    if (!isAcross) takeRow(next.row, { isRange: event.shiftKey, isMore: false });
  }

  /** A heading sorts; class and confidence of an own mark are chosen in their cell. */
  function enter(row: number, column: string): void {
    const mark = shown.value[row - 1];
    if (row === 0) return sortBy(column);
    if (!mark) return;
    if (!selectedKeys.value.has(mark.key)) bench.selectMark(mark.key);
    if (!mark.isOwn || (column !== 'class' && column !== 'confidence')) return;
    editing.value = { key: mark.key, column };
    void nextTick(() => frame.value?.querySelector<HTMLElement>('[role="gridcell"] select')?.focus());
  }

  function leave(isBack: boolean): void {
    editing.value = null;
    if (isBack) void grid.focusCell();
  }

  function rowOf(key: string | null): number {
    return shown.value.findIndex((mark) => mark.key === key) + 1;
  }

  /** Follows the mark in hand, wherever it was taken up; the keyboard stays in the table if it was there. */
  function follow(): void {
    const row = rowOf(selectedKey.value);
    if (row === 0 || row === cell.value.row) return;
    const next = { row, column: cell.value.column };
    if (frame.value?.contains(document.activeElement)) return void grid.focusCell(next);
    grid.wanted.value = next;
    grid.reveal(row);
  }
  watch([selectedKey, shown], follow, { flush: 'post' });

  return {
    editing,
    press,
    click,
    leave,
    focusSelected: () =>
      grid.focusCell({ ...cell.value, row: rowOf(selectedKey.value) || Math.max(1, cell.value.row) }),
  };
}
