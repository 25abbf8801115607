import { phaseSchema, phasesSchema } from '@shared/contract/phases.ts';
import type { GrowthPhase, GrowthPhases, PatchPhase, PutPhase } from '@shared/contract/phases.ts';
import { apiGet, apiSend, apiSendForNothing, revisionTag } from '@/api/client.ts';

/** Growth phases of a run that the person may see, in order of time. */
export async function listPhases(runId: string, signal?: AbortSignal): Promise<GrowthPhases> {
  return apiGet(`/api/runs/${runId}/phases`, phasesSchema, signal ? { signal } : {});
}

/** Tells a phase under an id made here; safe to repeat. */
export async function putPhase(id: string, body: PutPhase): Promise<GrowthPhase> {
  return apiSend('PUT', `/api/phases/${id}`, phaseSchema, { body });
}

export async function patchPhase(id: string, revision: number, body: PatchPhase): Promise<GrowthPhase> {
  return apiSend('PATCH', `/api/phases/${id}`, phaseSchema, { body, ifMatch: revisionTag(revision) });
}

export async function deletePhase(id: string, revision: number): Promise<void> {
  return apiSendForNothing('DELETE', `/api/phases/${id}`, { ifMatch: revisionTag(revision) });
}
