import { useQueries, useQueryClient } from '@tanstack/vue-query';
import { useDebounceFn } from '@vueuse/core';
import { computed, ref, shallowRef, watch } from 'vue';
import type { Ref } from 'vue';
import type {
  Candidate,
  CandidateFilters,
  CandidatesPage,
  CandidateSort,
} from '@shared/contract/candidates.ts';
import { listCandidatePage } from '@/api/candidates.ts';
import { pagesAround, placeOfRank, rowsPerPage } from '@/composables/candidates/rank-pages.ts';
import type { RankRange } from '@/composables/candidates/rank-pages.ts';
import { sameWhileEqual } from '@/composables/same-while-equal.ts';

export interface CandidateRowsOptions {
  recordingId: Ref<string>;
  filters: Ref<CandidateFilters>;
  sort: Ref<CandidateSort>;
}

const settleMs = 60;
/** Also while somebody scrolls on and on, rows come now and then. */
const longestMs = 250;
/** Pages that are out of sight, so that scrolling through everything does not keep everything. */
const keptMs = 60_000;

/** Rows of a long list by their ranks: pages are asked for where they are shown, and kept. */
export function useCandidateRows({ recordingId, filters, sort }: CandidateRowsOptions) {
  const queries = useQueryClient();
  const list = sameWhileEqual(() => ({ sort: sort.value, ...filters.value }));
  const range = shallowRef<RankRange>({ first: 0, last: 0 });
  /** Where somebody scrolls past, nothing is asked for. */
  const settled = shallowRef(range.value);
  const settle = useDebounceFn(() => (settled.value = range.value), settleMs, { maxWait: longestMs });
  /** Of the list shown last, until the first page of a new one says how many rows it has. */
  const count = ref<number | null>(null);

  const keyOf = (page: number) => ['candidates', recordingId.value, list.value, page];
  const wanted = computed(() => {
    const pages = pagesAround(settled.value, count.value ?? 0);
    return pages.length > 0 ? pages : [0];
  });
  const results = useQueries({
    shallow: true,
    queries: computed(() =>
      wanted.value.map((page) => ({
        queryKey: keyOf(page),
        queryFn: ({ signal }: { signal: AbortSignal }) =>
          listCandidatePage(
            recordingId.value,
            { ...list.value, rank: page * rowsPerPage, limit: rowsPerPage },
            signal,
          ),
        staleTime: Infinity,
        gcTime: keptMs,
      })),
    ),
  });

  const loaded = computed(() => {
    const pages = new Map<number, CandidatesPage>();
    for (const { data } of results.value) if (data) pages.set(Math.floor(data.firstRank / rowsPerPage), data);
    return pages;
  });

  function rowAt(rank: number): Candidate | undefined {
    const { page, index } = placeOfRank(rank);
    const found = loaded.value.get(page) ?? queries.getQueryData<CandidatesPage>(keyOf(page));
    return found?.items[index];
  }

  function show(shown: RankRange): void {
    range.value = shown;
    void settle();
  }

  /** After another measurement the list is another one. */
  function renew(): void {
    const queryKey = ['candidates', recordingId.value];
    queries.removeQueries({ queryKey, type: 'inactive' });
    void queries.invalidateQueries({ queryKey });
  }

  watch(list, () => (settled.value = range.value = { first: 0, last: 0 }), { flush: 'sync' });
  watch(
    loaded,
    (pages) => {
      for (const { total } of pages.values()) count.value = total.count;
    },
    { immediate: true },
  );

  return {
    count: computed(() => count.value),
    rowAt,
    error: computed<unknown>(() => results.value.find(({ error }) => error)?.error ?? null),
    isLoading: computed(() => results.value.some(({ isFetching }) => isFetching)),
    show,
    renew,
    retry: () => results.value.forEach((result) => void (result.error && result.refetch())),
  };
}
