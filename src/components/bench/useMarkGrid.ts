import { useVirtualizer } from '@tanstack/vue-virtual';
import type { Range } from '@tanstack/vue-virtual';
import { computed, nextTick, ref } from 'vue';
import type { Ref } from 'vue';
import { cellAfterKey } from '@/components/bench/grid-moves.ts';
import type { GridCell } from '@/components/bench/grid-moves.ts';
import { ranksInPage } from '@/components/recordings/ranks-in-page.ts';

export const ROW_PX = 26;
export const HEAD_PX = 27;
const sizeOfRow = () => ROW_PX;

export interface MarkGridOptions {
  frame: Readonly<Ref<HTMLElement | null>>;
  /** Rows without the headings. */
  count: Ref<number>;
  columns: Ref<number>;
}

export type MarkGrid = ReturnType<typeof useMarkGrid>;

/** Which cell of a long table takes the keyboard, and which rows stand in the page. Row 0 is that of the headings. */
export function useMarkGrid({ frame, count, columns }: MarkGridOptions) {
  const wanted = ref<GridCell>({ row: 1, column: 0 });
  const cell = computed<GridCell>(() => ({
    row: Math.min(wanted.value.row, count.value),
    column: Math.min(wanted.value.column, columns.value - 1),
  }));

  const virtualizer = useVirtualizer(
    computed(() => {
      const inHand = cell.value.row - 1;
      return {
        count: count.value,
        getScrollElement: () => frame.value,
        estimateSize: sizeOfRow,
        scrollMargin: HEAD_PX,
        scrollPaddingStart: HEAD_PX,
        rangeExtractor: (range: Range) => ranksInPage(range, inHand),
      };
    }),
  );

  /** The row comes into sight; the page around the table stays where it is. */
  function reveal(row: number): void {
    if (row > 0) virtualizer.value.scrollToIndex(row - 1);
    else if (frame.value) frame.value.scrollTop = 0;
  }

  async function focusCell(next: GridCell = cell.value): Promise<void> {
    wanted.value = next;
    reveal(next.row);
    await nextTick();
    const target = frame.value?.querySelector<HTMLElement>(`[data-cell="${next.row}:${next.column}"]`);
    target?.focus({ preventScroll: true });
    target?.scrollIntoView({ block: 'nearest', inline: 'nearest' });
  }

  function afterKey(event: KeyboardEvent): GridCell | null {
    const pageRows = Math.floor(((frame.value?.clientHeight ?? 0) - HEAD_PX) / ROW_PX);
    return cellAfterKey(event, cell.value, { rows: count.value + 1, columns: columns.value, pageRows });
  }

  return { virtualizer, cell, wanted, reveal, focusCell, afterKey };
}
