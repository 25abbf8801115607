import { keepPreviousData, useQuery } from '@tanstack/vue-query';
import { computed } from 'vue';
import type { Ref } from 'vue';
import type { CandidateFilters } from '@shared/contract/candidates.ts';
import { getCandidateOverview } from '@/api/candidates.ts';

/** Counts by class and in time under the filters; of every class, whichever the list shows. */
export function useCandidateOverview(recordingId: Ref<string>, filters: Ref<CandidateFilters>) {
  const query = computed(() => {
    const { hearingClass: _every, ...others } = filters.value;
    return others;
  });
  return useQuery({
    queryKey: computed(() => ['candidate-overview', recordingId.value, query.value]),
    queryFn: ({ signal }) => getCandidateOverview(recordingId.value, query.value, signal),
    placeholderData: keepPreviousData,
    shallow: true,
    staleTime: Infinity,
  });
}
