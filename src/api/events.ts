import { eventSchema, eventsSchema } from '@shared/contract/events.ts';
import type { PatchEvent, PutEvent, RecordingEvent } from '@shared/contract/events.ts';
import { apiGet, apiSend, apiSendForNothing, revisionTag } from '@/api/client.ts';

/** Marks of a recording that the person may see, in order of time. */
export async function listEvents(recordingId: string, signal?: AbortSignal): Promise<RecordingEvent[]> {
  const path = `/api/recordings/${recordingId}/events`;
  return (await apiGet(path, eventsSchema, signal ? { signal } : {})).items;
}

/** Marks are sent later too, when somebody else may be signed in at this browser. */
interface InTheNameOf {
  personId: string;
  signal: AbortSignal;
}

/** Sets a mark under an id made here; safe to repeat. */
export async function putEvent(id: string, body: PutEvent, as: InTheNameOf): Promise<RecordingEvent> {
  return apiSend('PUT', `/api/events/${id}`, eventSchema, { body, ...as });
}

export async function patchEvent(
  id: string,
  revision: number,
  body: PatchEvent,
  as: InTheNameOf,
): Promise<RecordingEvent> {
  const ifMatch = revisionTag(revision);
  return apiSend('PATCH', `/api/events/${id}`, eventSchema, { body, ifMatch, ...as });
}

export async function deleteEvent(id: string, revision: number, as: InTheNameOf): Promise<void> {
  return apiSendForNothing('DELETE', `/api/events/${id}`, { ifMatch: revisionTag(revision), ...as });
}
