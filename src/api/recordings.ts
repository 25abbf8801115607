import { recordingSchema, recordingsPageSchema } from '@shared/contract/recordings.ts';
import type { ListRecordingsQuery, Recording } from '@shared/contract/recordings.ts';
import { spectrumResponseSchema } from '@shared/contract/views.ts';
import { apiAddress, apiGet, apiSend } from '@/api/client.ts';

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

/** Another try for a measurement that failed. */
export async function stopMeasuring(id: string): Promise<Recording> {
  return apiSend('DELETE', `/api/recordings/${id}/measure`, recordingSchema);
}

export async function measureAgain(id: string): Promise<Recording> {
  return apiSend('POST', `/api/recordings/${id}/measure`, recordingSchema);
}

export type DownloadKind = 'audio' | 'frames.csv' | 'spectrum' | 'candidates.csv' | 'candidates.jsonl';

/** Address of a file to keep; descriptors and spectra have one for each channel. */
export function downloadAddress(id: string, kind: DownloadKind, channel?: number): string {
  return apiAddress(`/api/recordings/${id}/${kind}`, { channel });
}
