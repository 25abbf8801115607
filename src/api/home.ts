import { homeSchema } from '@shared/contract/home.ts';
import { apiGet } from '@/api/client.ts';

export async function getHome(signal?: AbortSignal) {
  return apiGet('/api/home', homeSchema, signal ? { signal } : {});
}
