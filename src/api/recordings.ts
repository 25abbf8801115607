import { candidatesPageSchema, recordingSchema, recordingsPageSchema } from '@shared/contract/recordings.ts';
import type { ListCandidatesQuery, ListRecordingsQuery, Recording } from '@shared/contract/recordings.ts';
import { spectrumResponseSchema } from '@shared/contract/views.ts';
import { apiAddress, apiGet, apiSend } from '@/api/client.ts';
import type { Query } from '@/api/client.ts';

export async function getRecording(id: string, signal?: AbortSignal): Promise<Recording> {
  return apiGet(`/api/recordings/${id}`, recordingSchema, signal ? { signal } : {});
}

export async function listRecordings(query: Partial<ListRecordingsQuery>, signal?: AbortSignal) {
  return apiGet('/api/recordings', recordingsPageSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

export async function getSpectrum(id: string, channel: number, signal?: AbortSignal) {
  return apiGet(`/api/recordings/${id}/spectrum`, spectrumResponseSchema, {
    query: { channel },
    ...(signal ? { signal } : {}),
  });
}

export async function listCandidatePage(
  id: string,
  query: Partial<ListCandidatesQuery>,
  signal?: AbortSignal,
) {
  return apiGet(`/api/recordings/${id}/candidates`, candidatesPageSchema, {
    query: { ...query },
    ...(signal ? { signal } : {}),
  });
}

/** Another try for a measurement that failed. */
export async function measureAgain(id: string): Promise<Recording> {
  return apiSend('POST', `/api/recordings/${id}/measure`, recordingSchema);
}

export type DownloadKind = 'audio' | 'frames.csv' | 'spectrum' | 'candidates';

const mostCandidates = 2000;
const queryOf: Readonly<Record<DownloadKind, Query>> = {
  audio: {},
  'frames.csv': { channel: 0 },
  spectrum: { channel: 0 },
  candidates: { limit: mostCandidates },
};

/** Address of a file to keep; descriptors and spectrum are those of the first channel. */
export function downloadAddress(id: string, kind: DownloadKind): string {
  return apiAddress(`/api/recordings/${id}/${kind}`, queryOf[kind]);
}
