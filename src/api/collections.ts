import {
  addedItemsSchema,
  collectionItemsPageSchema,
  collectionSchema,
  collectionsPageSchema,
  gatesSchema,
} from '@shared/contract/collections.ts';
import type {
  AddItems,
  Collection,
  ListCollectionsQuery,
  SaveCollection,
} from '@shared/contract/collections.ts';
import type { PageQuery } from '@shared/contract/page.ts';
import { apiGet, apiSend, apiSendForNothing, revisionTag } from '@/api/client.ts';

export async function listCollections(query: Partial<ListCollectionsQuery>, signal?: AbortSignal) {
  return apiGet('/api/collections', collectionsPageSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

export async function getCollection(id: string, signal?: AbortSignal): Promise<Collection> {
  return apiGet(`/api/collections/${id}`, collectionSchema, signal ? { signal } : {});
}

export async function createCollection(input: SaveCollection): Promise<Collection> {
  return apiSend('POST', '/api/collections', collectionSchema, { body: input });
}

/** Fails with `stale` where somebody changed the collection since `revision`. */
export async function updateCollection(
  id: string,
  revision: number,
  input: SaveCollection,
): Promise<Collection> {
  const ifMatch = revisionTag(revision);
  return apiSend('PUT', `/api/collections/${id}`, collectionSchema, { body: input, ifMatch });
}

export async function listCollectionItems(id: string, query: Partial<PageQuery>, signal?: AbortSignal) {
  return apiGet(`/api/collections/${id}/items`, collectionItemsPageSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

export async function addCollectionItems(id: string, input: AddItems) {
  return apiSend('POST', `/api/collections/${id}/items`, addedItemsSchema, { body: input });
}

export async function removeCollectionItem(id: string, recordingId: string): Promise<void> {
  return apiSendForNothing('DELETE', `/api/collections/${id}/items/${recordingId}`);
}

export async function getGates(id: string, signal?: AbortSignal) {
  return apiGet(`/api/collections/${id}/gates`, gatesSchema, signal ? { signal } : {});
}
