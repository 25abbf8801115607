import { useInfiniteQuery } from '@tanstack/vue-query';
import { computed, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Page } from '@shared/contract/page.ts';

export interface ListPagesOptions<Item> {
  /** Key of the list, filters included: a change starts again from the first page. */
  key: MaybeRefOrGetter<readonly unknown[]>;
  load: (cursor: string | undefined, signal: AbortSignal) => Promise<Page<Item>>;
  isEnabled?: MaybeRefOrGetter<boolean>;
}

/** A list that grows page by page, in the form that `AppTable` takes. */
export function useListPages<Item>(options: ListPagesOptions<Item>) {
  const query = useInfiniteQuery({
    queryKey: computed(() => toValue(options.key)),
    queryFn: ({ pageParam, signal }) => options.load(pageParam, signal),
    initialPageParam: undefined as string | undefined,
    getNextPageParam: (page: Page<Item>) => page.nextCursor ?? undefined,
    enabled: computed(() => toValue(options.isEnabled ?? true)),
    placeholderData: (previous) => previous,
  });
  return {
    rows: computed<Item[]>(() => query.data.value?.pages.flatMap((page) => page.items) ?? []),
    total: computed(() => query.data.value?.pages[0]?.total ?? null),
    hasMore: computed(() => query.hasNextPage.value),
    isLoading: computed(() => query.isPending.value),
    isLoadingMore: computed(() => query.isFetchingNextPage.value),
    error: computed<unknown>(() => query.error.value),
    more: () => query.fetchNextPage(),
    retry: () => query.refetch(),
  };
}
