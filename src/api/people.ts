import { peoplePageSchema, personChoicesSchema, personSchema } from '@shared/contract/people.ts';
import type { UpdatePerson } from '@shared/contract/people.ts';
import { apiGet, apiSend } from '@/api/client.ts';

interface ListPeople {
  q?: string | undefined;
  cursor?: string | undefined;
}

export async function listPeople(query: ListPeople, signal?: AbortSignal) {
  return apiGet('/api/people', peoplePageSchema, { query: { ...query }, ...(signal ? { signal } : {}) });
}

export async function updatePerson(id: string, input: UpdatePerson) {
  return apiSend('PATCH', `/api/people/${id}`, personSchema, { body: input });
}

export async function listLabelers() {
  return (await apiGet('/api/people/labelers', personChoicesSchema)).items;
}
