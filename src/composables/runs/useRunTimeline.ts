import { useQuery } from '@tanstack/vue-query';
import { useLocalStorage } from '@vueuse/core';
import { computed, toValue } from 'vue';
import type { MaybeRefOrGetter } from 'vue';
import type { Counted } from '@shared/contract/timeline.ts';
import { getTimeline } from '@/api/timeline.ts';

/** The recordings of a run on its clock, with the rate of candidates or of marks, as the person likes it. */
export function useRunTimeline(runId: MaybeRefOrGetter<string>) {
  const wanted = useLocalStorage<Counted>('recalesce.strip.counted', 'candidates');
  const query = useQuery({
    queryKey: computed(() => ['timeline', toValue(runId), wanted.value]),
    queryFn: ({ signal }) => getTimeline(toValue(runId), wanted.value, signal),
    placeholderData: (previous) => previous,
    staleTime: 30_000,
  });
  return {
    recordings: computed(() => query.data.value?.recordings ?? []),
    /** What is counted, as the server says; `null` where nothing may be. */
    counted: computed(() => query.data.value?.counted ?? null),
    leftOut: computed(() => query.data.value?.leftOut ?? 0),
    isLoaded: computed(() => query.data.value !== undefined),
    error: query.error,
    wanted,
  };
}
