import type { Locator, Page } from 'playwright-core';

export interface PassFacts {
  id: string;
  recordingId: string;
  recordingName: string;
  kind: string;
  task: string;
  blind: boolean;
}

export interface StoredMark {
  id: string;
  passId: string;
  startSample: number;
  classKey: string;
  confidence: string;
  note: string;
}

/**
 * The open pass over a whole recording that the demo gave to whoever is signed in. Other specs give further passes to the
 * same person, which come before it in the list: of several it is the oldest.
 */
export async function requirePass(page: Page, { blind }: { blind: boolean }): Promise<PassFacts> {
  const answer = await page.request.get('/api/passes?mine=true&state=assigned&limit=100');
  const { items } = (await answer.json()) as { items: PassFacts[] };
  const pass = items.findLast(
    ({ kind, task, blind: isBlind }) => kind === 'whole' && task === 'events' && isBlind === blind,
  );
  if (!pass) throw new Error(`The demo has no open pass over a whole recording with blind: ${blind}.`);
  return pass;
}

export async function openBenchAt(page: Page, pass: PassFacts, from: number): Promise<void> {
  await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}&from=${from}&to=${from + 100_000}`);
  // Once it shows itself it takes keys, whatever is still on its way.
  await page.locator('canvas.picture').waitFor();
}

export async function untilSaid(page: Page, words: RegExp): Promise<void> {
  await page.locator('[data-saving]').filter({ hasText: words }).waitFor();
}

export function markRows(page: Page): Locator {
  return page.getByRole('grid', { name: 'Marks' }).locator('[data-key]');
}

/** What the server has of a pass, asked past the page. */
export async function storedMarks(page: Page, pass: PassFacts): Promise<StoredMark[]> {
  const answer = await page.request.get(`/api/recordings/${pass.recordingId}/events?passId=${pass.id}`);
  return ((await answer.json()) as { items: StoredMark[] }).items;
}

/** Sets a mark by one key, a little to the right of the one before. */
export async function markNext(page: Page, key = 'KeyF'): Promise<void> {
  await page.keyboard.press('Escape');
  for (let presses = 0; presses < 12; presses++) await page.keyboard.press('ArrowRight');
  await page.keyboard.press(key);
}
