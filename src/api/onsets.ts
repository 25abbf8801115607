import { onsetAnswerSchema } from '@shared/contract/onset.ts';
import type { OnsetAnswer, OnsetQuery } from '@shared/contract/onset.ts';
import { apiGet } from '@/api/client.ts';

/** Where the sound in a span begins, measured on the samples as they were brought in. */
export async function pickOnset(
  recordingId: string,
  span: OnsetQuery,
  signal: AbortSignal,
): Promise<OnsetAnswer> {
  return apiGet(`/api/recordings/${recordingId}/onset`, onsetAnswerSchema, { query: { ...span }, signal });
}
