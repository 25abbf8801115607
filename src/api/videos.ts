import { problemSchema } from '@shared/contract/problem.ts';
import { addedVideoSchema, videoSchema, videosSchema } from '@shared/contract/videos.ts';
import type { AddedVideo, PatchVideo, Video, Videos } from '@shared/contract/videos.ts';
import { apiAddress, apiGet, apiSend, apiSendForNothing, revisionTag } from '@/api/client.ts';
import { clientProblem, ProblemError } from '@/api/problem-error.ts';

export async function listVideos(runId: string, signal?: AbortSignal): Promise<Videos> {
  return apiGet(`/api/runs/${runId}/videos`, videosSchema, signal ? { signal } : {});
}

export async function patchVideo(id: string, revision: number, body: PatchVideo): Promise<Video> {
  return apiSend('PATCH', `/api/videos/${id}`, videoSchema, { body, ifMatch: revisionTag(revision) });
}

export async function deleteVideo(id: string, revision: number): Promise<void> {
  return apiSendForNothing('DELETE', `/api/videos/${id}`, { ifMatch: revisionTag(revision) });
}

export async function restoreVideo(id: string, revision: number): Promise<Video> {
  return apiSend('POST', `/api/videos/${id}/restore`, videoSchema, { ifMatch: revisionTag(revision) });
}

/** For the player of the browser; as a download, under the name that it came with. */
export function filmAddress(id: string, isDownload = false): string {
  return apiAddress(`/api/videos/${id}/film`, isDownload ? { download: true } : {});
}

export interface FilmTransfer {
  runId: string;
  file: File;
  signal: AbortSignal;
  onProgress: (sentBytes: number) => void;
}

/** Sends a film in one request: `fetch` does not tell how much has gone. */
export function sendVideo({ runId, file, signal, onProgress }: FilmTransfer): Promise<AddedVideo> {
  const request = new XMLHttpRequest();
  const query = { fileName: file.name, peopleAgreed: true };
  return new Promise((resolve, reject) => {
    request.open('POST', apiAddress(`/api/runs/${runId}/videos`, query));
    request.setRequestHeader('content-type', 'application/octet-stream');
    request.upload.addEventListener('progress', (event) => onProgress(event.loaded));
    request.addEventListener('load', () => settle(request, resolve, reject));
    request.addEventListener('error', () =>
      reject(
        clientProblem('offline', 'The connection was lost before the whole film had gone. Send it again.'),
      ),
    );
    request.addEventListener('abort', () => reject(new DOMException('given up', 'AbortError')));
    signal.addEventListener('abort', () => request.abort(), { once: true });
    request.send(file);
  });
}

function settle(
  { status, responseText }: XMLHttpRequest,
  resolve: (video: AddedVideo) => void,
  reject: (problem: unknown) => void,
): void {
  const body = parsed(responseText);
  const video = addedVideoSchema.safeParse(body);
  if (status === 201 && video.success) return resolve(video.data);
  const problem = problemSchema.safeParse(body);
  if (problem.success) return reject(new ProblemError(problem.data));
  reject(clientProblem('unexpected-answer', `The server answered with status ${status} and no reason.`));
}

function parsed(text: string): unknown {
  try {
    return JSON.parse(text);
  } catch {
    return null;
  }
}
