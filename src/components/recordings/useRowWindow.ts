import { computed, ref, watch } from 'vue';

/** More rows than this make a page slow; those before them can be called back. */
const mostRows = 300;
const stepRows = 100;

/** The part of a growing list that stands in the page: the rows loaded last, until somebody goes back. */
export function useRowWindow<Row>(rows: () => readonly Row[]) {
  const first = ref(0);
  const shown = computed(() => rows().slice(first.value, first.value + mostRows));
  const hasLater = computed(() => first.value + mostRows < rows().length);

  function showBefore(): void {
    first.value = Math.max(0, first.value - stepRows);
  }

  function showLater(): void {
    first.value = Math.min(first.value + stepRows, Math.max(0, rows().length - mostRows));
  }

  // A list that starts again starts at its beginning.
  watch(
    () => rows().length,
    (length, before) => {
      first.value = length < before ? 0 : Math.max(first.value, length - mostRows);
    },
    { flush: 'sync' },
  );

  return { first, shown, hasLater, showBefore, showLater };
}
