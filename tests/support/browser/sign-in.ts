import type { APIResponse, BrowserContext, Page } from 'playwright-core';
import { inject } from 'vitest';

export type DemoPerson =
  | 'administrator'
  | 'contributor'
  | 'contributor2'
  | 'labeler'
  | 'labeler2'
  | 'reviewer'
  | 'curator'
  | 'curator2';

type StorageState = Awaited<ReturnType<BrowserContext['storageState']>>;

const keptSessions = new Map<DemoPerson, StorageState['cookies']>();
const longestWaitS = 65;

export function emailOf(person: DemoPerson): string {
  return `${person}@demo.example`;
}

async function isSignedIn(page: Page, origin: string): Promise<boolean> {
  const answer = await page.request.get(`${origin}/api/sessions/current`);
  const body = (await answer.json()) as { user?: unknown };
  return body.user !== null && body.user !== undefined;
}

async function postSession(page: Page, person: DemoPerson): Promise<APIResponse> {
  const { origin, password } = inject('demoServer');
  const request = () =>
    page.request.post(`${origin}/api/sessions`, {
      headers: { Origin: origin, 'Sec-Fetch-Site': 'same-origin' },
      data: { email: emailOf(person), password },
    });
  const answer = await request();
  if (answer.status() !== 429) return answer;
  const waitS = Math.min(longestWaitS, Number(answer.headers()['retry-after'] ?? longestWaitS));
  await new Promise((resolve) => setTimeout(resolve, waitS * 1000));
  return request();
}

/**
 * Signs a demo person in, by the interface that the sign-in page uses itself. Within a test file each person signs in once:
 * the rate limit would otherwise be a part of every test.
 */
export async function signIn(page: Page, person: DemoPerson): Promise<void> {
  const { origin } = inject('demoServer');
  const context = page.context();
  await context.clearCookies();
  const kept = keptSessions.get(person);
  if (kept !== undefined) {
    await context.addCookies(kept);
    if (await isSignedIn(page, origin)) return;
    await context.clearCookies();
  }
  const answer = await postSession(page, person);
  if (!answer.ok())
    throw new Error(`Signing in as ${person} was answered by ${answer.status()}: ${await answer.text()}`);
  keptSessions.set(person, (await context.storageState()).cookies);
}
