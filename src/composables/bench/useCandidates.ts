import { keepPreviousData, useQuery } from '@tanstack/vue-query';
import { refDebounced } from '@vueuse/core';
import { computed } from 'vue';
import type { Ref } from 'vue';
import type { Candidate } from '@shared/contract/candidates.ts';
import { listCandidatePage } from '@/api/candidates.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface CandidatesOptions {
  recordingId: string;
  isShown: boolean;
  window: Ref<TimeWindow>;
}

const SETTLE_MS = 200;
const MOST = 500;

/** Candidates of the part that is shown, where they may be seen at all. */
export function useCandidates({ recordingId, isShown, window }: CandidatesOptions) {
  const settled = refDebounced(window, SETTLE_MS);
  const span = computed(() => ({
    startSample: Math.floor(settled.value.startSample),
    endSample: Math.ceil(settled.value.endSample),
  }));
  const query = useQuery({
    queryKey: computed(() => ['candidates', recordingId, span.value]),
    queryFn: ({ signal }) => listCandidatePage(recordingId, { ...span.value, limit: MOST }, signal),
    enabled: isShown,
    placeholderData: keepPreviousData,
    staleTime: 60_000,
  });
  return {
    candidates: computed<Candidate[]>(() => query.data.value?.items ?? []),
    total: computed(() => query.data.value?.total ?? null),
  };
}
