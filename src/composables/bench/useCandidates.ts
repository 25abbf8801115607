import { keepPreviousData, useQuery } from '@tanstack/vue-query';
import { refDebounced } from '@vueuse/core';
import { computed } from 'vue';
import type { Ref } from 'vue';
import type { Candidate, CandidateOverview } from '@shared/contract/candidates.ts';
import { getCandidateOverview, listCandidatePage } from '@/api/candidates.ts';
import type { TimeWindow } from '@/composables/bench/time-axis.ts';

export interface CandidatesOptions {
  recordingId: string;
  isShown: boolean;
  window: Ref<TimeWindow>;
}

/** Candidates of a part: one by one, or where they are too many for that, how many in each step of it. */
export interface CandidatesInView {
  total: number;
  candidates: Candidate[];
  density: CandidateOverview | null;
}

const SETTLE_MS = 200;
/** More of them hide each other in the picture. */
const MOST = 500;
const STEPS = 400;

export async function loadInView(
  recordingId: string,
  span: TimeWindow,
  signal: AbortSignal,
): Promise<CandidatesInView> {
  const { items, total } = await listCandidatePage(recordingId, { ...span, limit: MOST }, signal);
  if (total.count <= MOST) return { total: total.count, candidates: items, density: null };
  const density = await getCandidateOverview(recordingId, { ...span, steps: STEPS }, signal);
  return { total: total.count, candidates: [], density };
}

/** Candidates of the part that is shown, where they may be seen at all. */
export function useCandidates({ recordingId, isShown, window }: CandidatesOptions) {
  const settled = refDebounced(window, SETTLE_MS);
  const span = computed(() => ({
    startSample: Math.floor(settled.value.startSample),
    endSample: Math.ceil(settled.value.endSample),
  }));
  const query = useQuery({
    queryKey: computed(() => ['candidates', recordingId, 'window', span.value]),
    queryFn: ({ signal }) => loadInView(recordingId, span.value, signal),
    enabled: isShown,
    placeholderData: keepPreviousData,
    shallow: true,
    staleTime: 60_000,
  });
  return {
    candidates: computed<readonly Candidate[]>(() => query.data.value?.candidates ?? []),
    density: computed(() => query.data.value?.density ?? null),
    total: computed(() => query.data.value?.total ?? null),
  };
}
