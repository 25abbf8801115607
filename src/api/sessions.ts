import {
  createdTokenSchema,
  currentSessionSchema,
  sessionsSchema,
  signedInSchema,
  tokensSchema,
} from '@shared/contract/sessions.ts';
import type { ChangePassword, CreateToken, CurrentUser, SignIn } from '@shared/contract/sessions.ts';
import { apiGet, apiSend, apiSendForNothing } from '@/api/client.ts';

export async function signIn(input: SignIn): Promise<CurrentUser> {
  return (await apiSend('POST', '/api/sessions', signedInSchema, { body: input })).user;
}

export async function signOut(): Promise<void> {
  await apiSendForNothing('DELETE', '/api/sessions/current');
}

export async function getCurrentUser(): Promise<CurrentUser | null> {
  return (await apiGet('/api/sessions/current', currentSessionSchema)).user;
}

export async function listSessions() {
  return (await apiGet('/api/sessions', sessionsSchema)).items;
}

export async function endSession(id: string): Promise<void> {
  await apiSendForNothing('DELETE', `/api/sessions/${id}`);
}

export async function listTokens() {
  return (await apiGet('/api/tokens', tokensSchema)).items;
}

export async function createToken(input: CreateToken) {
  return apiSend('POST', '/api/tokens', createdTokenSchema, { body: input });
}

export async function revokeToken(id: string): Promise<void> {
  await apiSendForNothing('DELETE', `/api/tokens/${id}`);
}

export async function changePassword(input: ChangePassword): Promise<void> {
  await apiSendForNothing('PUT', '/api/password', { body: input });
}
