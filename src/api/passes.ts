import { passesPageSchema, passSchema } from '@shared/contract/passes.ts';
import type { Pass, PassState } from '@shared/contract/passes.ts';
import { apiGet, apiSend } from '@/api/client.ts';

export interface PassFilters {
  recordingId?: string | undefined;
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
