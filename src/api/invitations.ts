import { createdInvitationSchema, invitationsSchema, openInvitationSchema } from '@shared/contract/people.ts';
import type { CreateInvitation } from '@shared/contract/people.ts';
import { signedInSchema } from '@shared/contract/sessions.ts';
import { apiGet, apiSend, apiSendForNothing } from '@/api/client.ts';

export interface NewAccount {
  name: string;
  password: string;
}

export async function listInvitations() {
  return (await apiGet('/api/invitations', invitationsSchema)).items;
}

export async function createInvitation(input: CreateInvitation) {
  return apiSend('POST', '/api/invitations', createdInvitationSchema, { body: input });
}

export async function revokeInvitation(id: string): Promise<void> {
  await apiSendForNothing('DELETE', `/api/invitations/${id}`);
}

export async function getOpenInvitation(token: string) {
  return apiGet(`/api/invitations/${encodeURIComponent(token)}`, openInvitationSchema);
}

export async function acceptInvitation(token: string, input: NewAccount) {
  const path = `/api/invitations/${encodeURIComponent(token)}/accept`;
  return (await apiSend('POST', path, signedInSchema, { body: input })).user;
}

export interface FirstAdministrator extends NewAccount {
  token: string;
  email: string;
}

export async function setUpService(input: FirstAdministrator) {
  return (await apiSend('POST', '/api/setup', signedInSchema, { body: input })).user;
}
