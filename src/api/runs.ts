import { runSchema, runsPageSchema } from '@shared/contract/runs.ts';
import type { ListRunsQuery, SaveRun } from '@shared/contract/runs.ts';
import { apiGet, apiSend, revisionTag } from '@/api/client.ts';

export type RunFilters = Partial<ListRunsQuery>;

export async function listRuns(filters: RunFilters, signal?: AbortSignal) {
  return apiGet('/api/runs', runsPageSchema, { query: { ...filters }, ...(signal ? { signal } : {}) });
}

export async function getRun(id: string, signal?: AbortSignal) {
  return apiGet(`/api/runs/${id}`, runSchema, signal ? { signal } : {});
}

export async function createRun(input: SaveRun) {
  return apiSend('POST', '/api/runs', runSchema, { body: input });
}

/** Fails with `stale` where somebody changed the run since `revision`; the problem then holds it as it is now. */
export async function updateRun(id: string, revision: number, input: SaveRun) {
  return apiSend('PUT', `/api/runs/${id}`, runSchema, { body: input, ifMatch: revisionTag(revision) });
}
