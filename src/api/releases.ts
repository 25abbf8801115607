import { releaseSchema, releasesPageSchema } from '@shared/contract/releases.ts';
import type { CreateRelease, Release } from '@shared/contract/releases.ts';
import { apiGet, apiSend } from '@/api/client.ts';

interface ReleaseFilters {
  collectionId?: string | undefined;
  cursor?: string | undefined;
}

export async function listReleases(filters: ReleaseFilters, signal?: AbortSignal) {
  return apiGet('/api/releases', releasesPageSchema, {
    query: { ...filters },
    ...(signal ? { signal } : {}),
  });
}

export async function getRelease(id: string, signal?: AbortSignal): Promise<Release> {
  return apiGet(`/api/releases/${id}`, releaseSchema, signal ? { signal } : {});
}

/** Freezes the collection as it is and starts to build its archive. */
export async function createRelease(collectionId: string, input: CreateRelease): Promise<Release> {
  return apiSend('POST', `/api/collections/${collectionId}/releases`, releaseSchema, { body: input });
}

export async function publishRelease(id: string): Promise<Release> {
  return apiSend('POST', `/api/releases/${id}/publish`, releaseSchema);
}

export async function withdrawRelease(id: string, reason: string): Promise<Release> {
  return apiSend('POST', `/api/releases/${id}/withdraw`, releaseSchema, { body: { reason } });
}

export function archiveAddress(id: string): string {
  return `/api/releases/${id}/archive`;
}

export function checksumAddress(id: string): string {
  return `/api/releases/${id}/archive.sha256`;
}
