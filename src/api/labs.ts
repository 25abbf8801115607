import { labSchema, labsSchema } from '@shared/contract/labs.ts';
import type { SaveLab } from '@shared/contract/labs.ts';
import { apiGet, apiSend } from '@/api/client.ts';

export async function listLabs() {
  return (await apiGet('/api/labs', labsSchema)).items;
}

export async function createLab(input: SaveLab) {
  return apiSend('POST', '/api/labs', labSchema, { body: input });
}

export async function renameLab(id: string, input: SaveLab) {
  return apiSend('PATCH', `/api/labs/${id}`, labSchema, { body: input });
}
