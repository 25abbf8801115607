import { reviewHistorySchema, reviewSchema, reviewsPageSchema } from '@shared/contract/reviews.ts';
import type { Decide, HeldRecording, Review } from '@shared/contract/reviews.ts';
import { apiGet, apiSend } from '@/api/client.ts';

interface ReviewFilters {
  recordingId?: string | undefined;
  cursor?: string | undefined;
}

export async function listHeld(filters: ReviewFilters, signal?: AbortSignal) {
  return apiGet('/api/reviews', reviewsPageSchema, { query: { ...filters }, ...(signal ? { signal } : {}) });
}

/** The recording as it waits for a decision; null where it does not, or not for this person. */
export async function getHeld(recordingId: string, signal?: AbortSignal): Promise<HeldRecording | null> {
  return (await listHeld({ recordingId }, signal)).items[0] ?? null;
}

export async function listDecisions(recordingId: string, signal?: AbortSignal): Promise<Review[]> {
  const path = `/api/recordings/${recordingId}/decisions`;
  return (await apiGet(path, reviewHistorySchema, signal ? { signal } : {})).items;
}

export async function decide(recordingId: string, input: Decide): Promise<Review> {
  return apiSend('POST', `/api/recordings/${recordingId}/decision`, reviewSchema, { body: input });
}
