import { broughtInSchema, createdUploadSchema, uploadsSchema } from '@shared/contract/uploads.ts';
import type { CreateUpload } from '@shared/contract/uploads.ts';
import { apiGet, apiSend, apiSendForNothing } from '@/api/client.ts';

export async function createUpload(input: CreateUpload): Promise<string> {
  return (await apiSend('POST', '/api/uploads', createdUploadSchema, { body: input })).id;
}

/** The own uploads that are not finished, with what the server holds of each. */
export async function listUploads(signal?: AbortSignal) {
  return (await apiGet('/api/uploads', uploadsSchema, signal ? { signal } : {})).items;
}

export async function cancelUpload(id: string): Promise<void> {
  await apiSendForNothing('DELETE', `/api/uploads/${id}`);
}

/** Turns the whole upload into a recording. Asked again after a lost answer, it gives the same one. */
export async function completeUpload(id: string, sha256: string | undefined) {
  return (await apiSend('POST', `/api/uploads/${id}/complete`, broughtInSchema, { body: { sha256 } }))
    .recording;
}
