import { passesPageSchema, passSchema } from '@shared/contract/passes.ts';
import type { ChangePass, CreatePass, Pass, PassState } from '@shared/contract/passes.ts';
import { apiGet, apiSend } from '@/api/client.ts';

export interface PassFilters {
  recordingId?: string | undefined;
  labelerId?: string | undefined;
  overdue?: boolean | undefined;
  mine?: boolean | undefined;
  state?: PassState | undefined;
  cursor?: string | undefined;
  limit?: number | undefined;
}

export async function listPasses(filters: PassFilters, signal?: AbortSignal) {
  return apiGet('/api/passes', passesPageSchema, { query: { ...filters }, ...(signal ? { signal } : {}) });
}

/** Ends the own pass; its marks cannot be changed afterwards. */
export async function finishPass(id: string, remark: string): Promise<Pass> {
  return apiSend('POST', `/api/passes/${id}/finish`, passSchema, { body: { remark } });
}

/** Gives a measured recording to a labeler. */
export async function createPass(input: CreatePass): Promise<Pass> {
  return apiSend('POST', '/api/passes', passSchema, { body: input });
}

/** Takes an open pass back. */
export async function cancelPass(id: string): Promise<Pass> {
  return apiSend('POST', `/api/passes/${id}/cancel`, passSchema);
}

/** Due date and instructions of an open pass; what is left out stays. */
export async function changePass(id: string, input: ChangePass): Promise<Pass> {
  return apiSend('PATCH', `/api/passes/${id}`, passSchema, { body: input });
}
