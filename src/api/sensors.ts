import { sensorSchema, sensorsSchema, setupSchema, setupsSchema } from '@shared/contract/sensors.ts';
import type { SaveSensor, SaveSetup } from '@shared/contract/sensors.ts';
import { apiGet, apiSend, revisionTag } from '@/api/client.ts';

export async function listSensors(labId?: string, signal?: AbortSignal) {
  return (await apiGet('/api/sensors', sensorsSchema, { query: { labId }, ...(signal ? { signal } : {}) }))
    .items;
}

export async function createSensor(input: SaveSensor) {
  return apiSend('POST', '/api/sensors', sensorSchema, { body: input });
}

export async function updateSensor(id: string, revision: number, input: SaveSensor) {
  return apiSend('PUT', `/api/sensors/${id}`, sensorSchema, { body: input, ifMatch: revisionTag(revision) });
}

export async function listSetups(labId?: string, signal?: AbortSignal) {
  return (await apiGet('/api/setups', setupsSchema, { query: { labId }, ...(signal ? { signal } : {}) }))
    .items;
}

export async function createSetup(input: SaveSetup) {
  return apiSend('POST', '/api/setups', setupSchema, { body: input });
}

export async function updateSetup(id: string, revision: number, input: SaveSetup) {
  return apiSend('PUT', `/api/setups/${id}`, setupSchema, { body: input, ifMatch: revisionTag(revision) });
}
