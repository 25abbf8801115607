import { timelineSchema } from '@shared/contract/timeline.ts';
import type { Counted, RunTimeline } from '@shared/contract/timeline.ts';
import { apiGet } from '@/api/client.ts';

/** The recordings of a run on its clock, with level and rate of events. */
export async function getTimeline(
  runId: string,
  counted: Counted,
  signal?: AbortSignal,
): Promise<RunTimeline> {
  const query = { counted };
  return apiGet(`/api/runs/${runId}/timeline`, timelineSchema, signal ? { query, signal } : { query });
}
