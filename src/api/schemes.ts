import { labelSchemeSchema } from '@shared/contract/schemes.ts';
import type { LabelScheme } from '@shared/contract/schemes.ts';
import { apiGet } from '@/api/client.ts';

/** One version of the label scheme, or the one in force. */
export async function getScheme(version: number | 'newest', signal?: AbortSignal): Promise<LabelScheme> {
  return apiGet(`/api/schemes/${version}`, labelSchemeSchema, signal ? { signal } : {});
}
