import {
  createdTraceSchema,
  recalescencesSchema,
  tracePointsSchema,
  traceSchema,
  tracesSchema,
} from '@shared/contract/traces.ts';
import type { CreatedTrace, CreateTrace, PatchTrace, TracePointsQuery } from '@shared/contract/traces.ts';
import { apiGet, apiSend, apiSendForNothing, revisionTag } from '@/api/client.ts';
import { sendForm } from '@/api/send-form.ts';
import type { FormSending } from '@/api/send-form.ts';

const withSignal = (signal?: AbortSignal) => (signal ? { signal } : {});

export async function listTraces(runId: string, signal?: AbortSignal) {
  return (await apiGet(`/api/runs/${runId}/traces`, tracesSchema, withSignal(signal))).items;
}

export async function getTracePoints(
  id: string,
  query: Partial<TracePointsQuery> = {},
  signal?: AbortSignal,
) {
  return apiGet(`/api/traces/${id}/points`, tracePointsSchema, {
    query: { ...query },
    ...withSignal(signal),
  });
}

export async function getRecalescences(id: string, signal?: AbortSignal) {
  return apiGet(`/api/traces/${id}/recalescence`, recalescencesSchema, withSignal(signal));
}

/** Sends a table whole; stopped by the signal, nothing of it stays. */
export async function sendTrace(
  runId: string,
  file: Blob & { name: string },
  trace: CreateTrace,
  sending: FormSending,
): Promise<CreatedTrace> {
  const form = new FormData();
  form.append('trace', JSON.stringify(trace));
  form.append('file', file, file.name);
  return sendForm(`/api/runs/${runId}/traces`, form, createdTraceSchema, sending);
}

export async function changeTrace(id: string, revision: number, input: PatchTrace) {
  return apiSend('PATCH', `/api/traces/${id}`, traceSchema, { body: input, ifMatch: revisionTag(revision) });
}

export async function removeTrace(id: string, revision: number): Promise<void> {
  return apiSendForNothing('DELETE', `/api/traces/${id}`, { ifMatch: revisionTag(revision) });
}

/** Takes a removal back; `revision` is the one that was removed. */
export async function restoreTrace(id: string, revision: number) {
  return apiSend('POST', `/api/traces/${id}/restore`, traceSchema, { ifMatch: revisionTag(revision + 1) });
}

export function traceFileAddress(id: string): string {
  return `/api/traces/${id}/file`;
}
