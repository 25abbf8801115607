import { useQuery } from '@tanstack/vue-query';
import { refDebounced } from '@vueuse/core';
import { computed, ref, watch } from 'vue';
import type { Ref } from 'vue';
import { listCollectionItems } from '@/api/collections.ts';
import { listRecordings } from '@/api/recordings.ts';
import { emptyAddingFilter, toItemFilter } from '@/composables/collections/adding-filter.ts';
import type { AddingFilter } from '@/composables/collections/adding-filter.ts';

const PAGE = 200;
/** Beyond this many members the count is told as "up to". */
const MOST_PAGES = 10;

interface MemberIds {
  ids: ReadonlySet<string>;
  isWhole: boolean;
}

async function loadMemberIds(collectionId: string, signal: AbortSignal): Promise<MemberIds> {
  const ids = new Set<string>();
  let cursor: string | undefined;
  for (let page = 0; page < MOST_PAGES; page += 1) {
    const { items, nextCursor } = await listCollectionItems(collectionId, { cursor, limit: PAGE }, signal);
    for (const { id } of items) ids.add(id);
    if (nextCursor === null) return { ids, isWhole: true };
    cursor = nextCursor;
  }
  return { ids, isWhole: false };
}

/** Shared recordings that a filter finds, beside what is in the collection already. */
export function useShareable(collectionId: Ref<string>, isOpen: Ref<boolean>) {
  const filter = ref<AddingFilter>({ ...emptyAddingFilter });
  const settled = refDebounced(
    computed(() => toItemFilter(filter.value)),
    250,
  );
  const matches = useQuery({
    queryKey: computed(() => ['shareable', settled.value]),
    queryFn: ({ signal }) =>
      listRecordings({ ...settled.value, sharing: 'shared', processing: 'measured', limit: PAGE }, signal),
    enabled: isOpen,
    placeholderData: (previous) => previous,
  });
  const members = useQuery({
    queryKey: computed(() => ['collection-member-ids', collectionId.value]),
    queryFn: ({ signal }) => loadMemberIds(collectionId.value, signal),
    enabled: isOpen,
  });

  const labNames = ref(new Map<string, string>());
  watch(matches.data, (page) => {
    for (const { labId, labName } of page?.items ?? []) labNames.value.set(labId, labName);
  });
  const labs = computed(() =>
    [...labNames.value]
      .map(([value, label]) => ({ value, label }))
      .sort((a, b) => a.label.localeCompare(b.label)),
  );

  return {
    filter,
    settled,
    labs,
    rows: computed(() => matches.data.value?.items ?? []),
    total: computed(() => matches.data.value?.total ?? null),
    memberIds: computed<ReadonlySet<string>>(() => members.data.value?.ids ?? new Set()),
    areMembersKnown: computed(() => members.data.value?.isWhole ?? false),
    isLoading: computed(() => matches.isPending.value),
    error: computed<unknown>(() => matches.error.value ?? members.error.value),
    retry: () => Promise.all([matches.refetch(), members.refetch()]),
  };
}
