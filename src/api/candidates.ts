import { candidateOverviewSchema, candidatesPageSchema } from '@shared/contract/candidates.ts';
import type {
  CandidateFilters,
  CandidateOverviewQuery,
  ListCandidatesQuery,
} from '@shared/contract/candidates.ts';
import { apiAddress, apiGet } from '@/api/client.ts';

export async function listCandidatePage(
  id: string,
  query: Partial<ListCandidatesQuery>,
  signal?: AbortSignal,
) {
  return apiGet(`/api/recordings/${id}/candidates`, candidatesPageSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

/** Counts by class, and how they lie in time. */
export async function getCandidateOverview(
  id: string,
  query: Partial<CandidateOverviewQuery>,
  signal?: AbortSignal,
) {
  return apiGet(`/api/recordings/${id}/candidates/overview`, candidateOverviewSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

/** Address of a file with every candidate that the filters leave. */
export function candidatesFileAddress(
  id: string,
  ending: 'csv' | 'jsonl',
  filters: CandidateFilters = {},
): string {
  return apiAddress(`/api/recordings/${id}/candidates.${ending}`, filters);
}
