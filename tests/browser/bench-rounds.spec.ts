import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

interface PassFacts {
  id: string;
  recordingId: string;
  kind: string;
}

async function openRound(page: Page): Promise<PassFacts> {
  await signIn(page, 'labeler');
  const answer = await page.request.get('/api/passes?mine=true&state=assigned&limit=100');
  const { items } = (await answer.json()) as { items: PassFacts[] };
  const pass = items.find(({ kind }) => kind === 'rounds');
  if (!pass) throw new Error('The demo has no open pass of rounds.');
  await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}`);
  await untilShown(page);
  return pass;
}

async function untilShown(page: Page): Promise<void> {
  await page.locator('[data-round-place]').waitFor();
}

async function untilAnswered(page: Page, count: number): Promise<void> {
  await page
    .locator('[data-round-progress]')
    .filter({ hasText: new RegExp(`^${count} of`) })
    .waitFor();
}

async function untilStored(page: Page): Promise<void> {
  await page
    .locator('[data-saving]')
    .filter({ hasText: /All\s\d+\sanswers?\sstored|No answers yet/ })
    .waitFor();
}

/** Presses a key for the candidate that is shown, and waits for the next one. */
async function press(page: Page, key: string): Promise<void> {
  const before = await page.locator('[data-round-place]').getAttribute('data-candidate');
  await page.keyboard.press(key);
  await page.locator(`[data-round-place]:not([data-candidate="${before}"])`).waitFor();
}

async function roundOf(page: Page, { id }: PassFacts, query = '') {
  const answer = await page.request.get(`/api/passes/${id}/round?rank=0&limit=200${query}`);
  return (await answer.json()) as {
    progress: { candidates: number; events: number; noEvents: number; undecided: number };
    items: { answer: { verdict: string; classKey: string | null; isSpotCheck: boolean } | null }[];
  };
}

describe('a round', () => {
  test('answers twenty candidates by one key each, and goes on where it was after a reload', async ({
    page,
  }) => {
    const pass = await openRound(page);
    const keys = ['KeyF', 'KeyL', 'Shift+KeyD', 'Semicolon', ...new Array<string>(16).fill('KeyJ')];
    for (const key of keys) await press(page, key);
    await untilAnswered(page, 20);
    await untilStored(page);
    await takeScreenshot(page, 'bench-round-light');
    expect(await page.locator('[data-round-heard]').innerText()).toMatch(/times slower: |As recorded/);
    const { items, progress } = await roundOf(page, pass);
    expect(progress).toMatchObject({ events: 3, noEvents: 16, undecided: 1 });
    expect(items.slice(0, 4).map(({ answer }) => answer?.classKey)).toEqual([
      'crack',
      'crack',
      'crackle',
      null,
    ]);
    await page.reload();
    await untilShown(page);
    expect(await page.locator('[data-round-place]').innerText()).toContain('Candidate 21');
    await press(page, 'KeyJ');
    await untilAnswered(page, 21);
    // A round goes from candidate to candidate, not over the recording.
    expect(await page.getByRole('img', { name: /^Coverage/ }).count()).toBe(0);
    expect(await page.getByRole('button', { name: 'Next unseen' }).count()).toBe(0);
  });

  test('takes an answer back, with its mark, and shows the candidate again', async ({ page }) => {
    const pass = await openRound(page);
    const before = await roundOf(page, pass);
    const shown = await page.locator('[data-round-place]').innerText();
    await press(page, 'KeyF');
    await untilStored(page);
    expect((await roundOf(page, pass)).progress.events).toBe(before.progress.events + 1);
    await press(page, 'Control+KeyZ');
    await untilStored(page);
    expect(await page.locator('[data-round-place]').innerText()).toBe(shown);
    expect((await roundOf(page, pass)).progress).toEqual(before.progress);
  });

  test('loses no answer while the net is gone, nor when the page ends meanwhile', async ({ page, guard }) => {
    const pass = await openRound(page);
    const before = (await roundOf(page, pass)).progress;
    guard.expectConsoleError(/net::ERR_FAILED/);
    await page.route('**/verdict', (route) => route.abort());
    for (let n = 0; n < 3; n++) await press(page, 'KeyJ');
    await page
      .locator('[data-saving]')
      .filter({ hasText: /Kept here, 3.answers waiting/ })
      .waitFor();
    // From whatever page is open, and told where one begins.
    await page.goto('/');
    await page.getByText(/3.answers kept in this browser, not stored yet/).waitFor();
    await takeScreenshot(page, 'home-kept-answers-light');
    await page.unroute('**/verdict');
    await page.evaluate(() => globalThis.dispatchEvent(new Event('online')));
    await page.getByText(/answers? kept in this browser/).waitFor({ state: 'detached' });
    expect((await roundOf(page, pass)).progress.noEvents).toBe(before.noEvents + 3);
  });

  test('answers look-alikes at once after the spot checks, and takes them back by one key', async ({
    page,
    openPage,
  }) => {
    const pass = await openRound(page);
    await page.getByText('Order and playing').click();
    await page.getByLabel('Order', { exact: true }).selectOption('likeness');
    await page.getByRole('heading', { name: /Look-alikes/ }).waitFor();
    const atOnce = page.getByRole('button', { name: /^Answer the other/ });
    for (let n = 0; n < 12 && !(await atOnce.isVisible()); n++) await press(page, 'KeyJ');
    await untilStored(page);
    const before = (await roundOf(page, pass)).progress;
    const rest = Number(/other (\d+)/.exec(await atOnce.innerText())?.[1]);
    expect(rest).toBeGreaterThan(1);
    await takeScreenshot(page, 'bench-round-look-alikes-light');
    await checkAxe(page);
    await press(page, 'Shift+KeyL');
    await untilStored(page);
    expect((await roundOf(page, pass)).progress.noEvents).toBe(before.noEvents + rest);
    await press(page, 'Control+KeyZ');
    await untilStored(page);
    expect((await roundOf(page, pass)).progress).toEqual(before);
    const dark = await openPage({ colorScheme: 'dark', viewport: { width: 1440, height: 900 } });
    await openRound(dark);
    await dark.waitForLoadState('networkidle');
    await takeScreenshot(dark, 'bench-round-dark');
    await checkAxe(dark);
  });

  test('is not there in a blind pass', async ({ page }) => {
    await signIn(page, 'labeler');
    const answer = await page.request.get('/api/passes?mine=true&state=assigned&limit=100');
    const { items } = (await answer.json()) as { items: (PassFacts & { blind: boolean })[] };
    const blind = items.find((pass) => pass.blind);
    if (!blind) throw new Error('The demo has no open blind pass.');
    await page.goto(`/bench/${blind.recordingId}?pass=${blind.id}`);
    await page.locator('canvas.picture').waitFor();
    expect(await page.getByRole('heading', { name: 'Round' }).count()).toBe(0);
    expect(await page.getByRole('button', { name: /No event/ }).count()).toBe(0);
    expect((await page.request.get(`/api/passes/${blind.id}/round`)).status()).toBe(409);
  });
});
