import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

interface PassFacts {
  id: string;
  recordingId: string;
  task: string;
  kind: string;
  blind: boolean;
  windows: { startSample: number; endSample: number }[] | null;
}

/** Walked through in order: each step needs what the one before has made. */
const walk = { recordingId: '' };

async function itemsOf<Item>(page: Page, address: string): Promise<Item[]> {
  const answer = await page.request.get(address);
  return ((await answer.json()) as { items: Item[] }).items;
}

/** A shared recording of one channel on which nobody has a pass. */
async function findFree(page: Page): Promise<string> {
  const recordings = await itemsOf<{ id: string; durationS: number; channels: number }>(
    page,
    '/api/recordings?sharing=shared&processing=measured&limit=100',
  );
  const passes = await itemsOf<{ recordingId: string }>(page, '/api/passes?limit=200');
  const taken = new Set(passes.map(({ recordingId }) => recordingId));
  const free = recordings.find(
    ({ id, durationS, channels }) => !taken.has(id) && durationS >= 12 && channels === 1,
  );
  if (!free) throw new Error('Every recording of the demo has a pass.');
  return free.id;
}

async function openPass(page: Page, find: (pass: PassFacts) => boolean): Promise<PassFacts> {
  const pass = (await itemsOf<PassFacts>(page, '/api/passes?mine=true&state=assigned')).find(find);
  if (!pass) throw new Error('There is no such open pass.');
  return pass;
}

async function openBench(page: Page, { recordingId, id }: PassFacts): Promise<void> {
  await page.goto(`/bench/${recordingId}?pass=${id}`);
  await page.locator('canvas.picture').waitFor();
  await page.waitForLoadState('networkidle');
}

const coverage = (page: Page) => page.getByRole('img', { name: /^Coverage:/ });

async function seenPercent(page: Page): Promise<number> {
  const label = (await coverage(page).getAttribute('aria-label')) ?? '';
  return Number(/(\d+) % seen/.exec(label)?.[1]);
}

async function untilSeen(page: Page, least: number): Promise<void> {
  await expect.poll(() => seenPercent(page), { timeout: 15_000 }).toBeGreaterThanOrEqual(least);
}

/** What the server has of it; the bench sends every few seconds. */
async function storedShare(page: Page, { id }: PassFacts): Promise<number> {
  const answer = await page.request.get(`/api/passes/${id}/coverage`);
  return ((await answer.json()) as { seenShare: number }).seenShare;
}

const isNew = (pass: PassFacts) => pass.recordingId === walk.recordingId;

describe('a pass of windows', () => {
  test('is assigned by a curator, who is told what will be drawn and how long it is likely to take', async ({
    page,
  }) => {
    await signIn(page, 'curator');
    walk.recordingId = await findFree(page);
    await page.goto(`/recordings/${walk.recordingId}`);
    await page.getByRole('button', { name: 'Assign a pass' }).click();
    const dialog = page.getByRole('dialog');
    await dialog.getByLabel('Labeler').selectOption({ label: 'Ilse Marwick' });
    await dialog.getByLabel('Windows drawn at random').check();
    await dialog.getByLabel('Length of a window').fill('1');
    await dialog.getByLabel('How much').selectOption({ label: 'a number of windows' });
    await dialog.getByLabel('Windows', { exact: true }).fill('3');
    await dialog.getByText(/^3 windows of 1\ss, \d+ % of the recording/).waitFor();
    await dialog.getByText(/Likely to take about \d+ min/).waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'pass-form');
    await dialog.getByRole('button', { name: 'Assign' }).click();
    await page.getByRole('listitem').filter({ hasText: '3 windows, blind' }).waitFor();
  });

  test('shows its windows one after another by key, and its coverage grows with what is looked at', async ({
    page,
  }) => {
    await signIn(page, 'labeler');
    const pass = await openPass(page, isNew);
    await openBench(page, pass);
    expect(await seenPercent(page)).toBe(0);
    await page.keyboard.press('Quote');
    await untilSeen(page, 33);
    await takeScreenshot(page, 'bench-windows');
    await page.keyboard.press('Semicolon');
    await untilSeen(page, 66);
    await page.reload();
    await page.locator('canvas.picture').waitFor();
    await untilSeen(page, 66);
    await checkAxe(page);
    await expect.poll(() => storedShare(page, pass), { timeout: 15_000 }).toBeGreaterThan(0.6);
  });

  test('takes a mark inside a window, and none outside', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await openPass(page, isNew);
    const [window] = pass.windows ?? [];
    if (!window) throw new Error('The pass has no window.');
    const gap = `from=${window.endSample + 100}&to=${window.endSample + 300}`;
    await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}&${gap}`);
    await page.locator('canvas.picture').waitFor();
    await page.getByText('Outside the windows of this pass').first().waitFor();
    await page.keyboard.press('KeyF');
    const inside = `from=${window.startSample + 100}&to=${window.startSample + 3000}`;
    await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}&${inside}`);
    await page.locator('canvas.picture').waitFor();
    await page.keyboard.press('KeyF');
    await page
      .locator('[data-saving]')
      .filter({ hasText: /stored/ })
      .waitFor();
    expect(await itemsOf(page, `/api/recordings/${pass.recordingId}/events`)).toHaveLength(1);
  });

  test('is finished only with a reason while something was not seen', async ({ page }) => {
    await signIn(page, 'labeler');
    await openBench(page, await openPass(page, isNew));
    await page.getByRole('button', { name: 'Finish pass' }).click();
    const sheet = page.getByRole('dialog');
    await sheet.getByText(/Not seen from near enough/).waitFor();
    await sheet.getByRole('button', { name: 'Finish pass' }).click();
    await sheet.getByText(/Something was not seen/).waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'bench-finish');
    await sheet.getByLabel('Why is the rest left out?').fill('The last window is only hum.');
    await sheet.getByRole('button', { name: 'Finish pass' }).click();
    await page.getByText('Pass finished').waitFor({ state: 'attached' });
  });

  test('tells the curator what was seen and what was left out', async ({ page }) => {
    await signIn(page, 'curator');
    await page.goto('/passes?state=finished');
    const row = page.getByRole('listitem').filter({ hasText: 'The last window is only hum.' });
    await row.getByText(/6\d % seen/).waitFor();
    await takeScreenshot(page, 'passes');
    await page.getByLabel('Overdue only').check();
    await page.waitForURL(/overdue=yes/);
  });
});

describe('a blind pass', () => {
  test('gets nothing that the machine or others found', async ({ page }) => {
    await signIn(page, 'labeler');
    const answers: string[] = [];
    page.on('response', (response) => {
      if (response.headers()['content-type']?.includes('json'))
        void response.text().then(
          (text) => answers.push(text),
          () => undefined,
        );
    });
    await openBench(page, await openPass(page, ({ blind, kind }) => blind && kind === 'whole'));
    expect(answers.length).toBeGreaterThan(3);
    const told = answers.join('\n');
    expect(told).not.toMatch(/"(candidateCount|eventCount)":[1-9]\d*,"[^}]*"blind":true/);
    expect(told).not.toMatch(/"verdict":"(found|not-found)"/);
    expect(told).not.toMatch(/"activeSpans":\[\{/);
  });
});

test('a pass of growth phases opens without a picture of the sound, and says why', async ({ page }) => {
  await signIn(page, 'labeler2');
  const pass = await openPass(page, ({ task }) => task === 'phases');
  const asked: string[] = [];
  page.on('request', (request) => asked.push(request.url()));
  await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}`);
  await page.getByText('The sound of this run is kept back.').waitFor();
  await page.waitForLoadState('networkidle');
  expect(
    asked.filter((url) => /recordings.*\/(spectrogram|peaks|listen|audio|candidates)/.test(url)),
  ).toEqual([]);
  await checkAxe(page);
  await takeScreenshot(page, 'bench-silent');
});
