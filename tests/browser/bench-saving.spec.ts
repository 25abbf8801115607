import { cp, mkdtemp, rm } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import path from 'node:path';
import type { Page } from 'playwright-core';
import { describe, expect, inject } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import {
  markNext,
  markRows,
  openBenchAt,
  requirePass,
  storedMarks,
  untilSaid,
} from '../support/browser/bench-page.ts';
import { findFreePort, startServer } from '../support/browser/demo-server.ts';
import { PageGuard } from '../support/browser/page-guard.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { emailOf, signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

const EVENTS = '**/api/events/**';
const CUT_MARKS = 12;
const BETWEEN_MARKS_MS = 5000;

async function signInOverThePage(page: Page): Promise<void> {
  const dialog = page.getByRole('dialog', { name: 'Sign in again to go on' });
  await dialog.getByLabel('Password').fill(inject('demoServer').password);
  await dialog.getByRole('button', { name: 'Sign in' }).click();
  await dialog.waitFor({ state: 'hidden' });
}

async function endSession(page: Page): Promise<void> {
  const { origin } = inject('demoServer');
  const headers = { Origin: origin, 'Sec-Fetch-Site': 'same-origin' };
  const answer = await page.request.delete('/api/sessions/current', { headers });
  expect(answer.ok()).toBe(true);
}

describe('marks on the bench are never lost', () => {
  test('while the network is cut for a minute', async ({ page, guard }) => {
    guard.expectConsoleError(/ERR_INTERNET_DISCONNECTED/);
    // The minute passes by the clock of the page, which runs on and is put forward.
    await page.clock.install();
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBenchAt(page, pass, 200_000);
    const before = await storedMarks(page, pass);
    await page.context().setOffline(true);
    for (let mark = 0; mark < CUT_MARKS; mark++) {
      await markNext(page);
      if (mark === 0) await untilSaid(page, /Kept here, 1 waiting: the server cannot be reached/);
      await page.clock.fastForward(BETWEEN_MARKS_MS);
    }
    await untilSaid(page, /Kept here, 12 waiting/);
    await checkAxe(page);
    await takeScreenshot(page, 'bench-cut');
    await page.context().setOffline(false);
    await untilSaid(page, /stored/);
    const after = await storedMarks(page, pass);
    expect(after.length - before.length).toBe(CUT_MARKS);
    expect(new Set(after.map(({ startSample }) => startSample)).size).toBe(
      new Set(before.map(({ startSample }) => startSample)).size + CUT_MARKS,
    );
  });

  test('when the window is closed before they could be sent', async ({ page, guard }) => {
    guard.expectConsoleError(/ERR_FAILED/);
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBenchAt(page, pass, 400_000);
    const before = (await storedMarks(page, pass)).length;
    await page.context().route(EVENTS, (route) => route.abort());
    await markNext(page);
    await markNext(page, 'KeyD');
    await untilSaid(page, /Kept here, 2 waiting/);
    const context = page.context();
    await page.close();
    const later = await context.newPage();
    await later.goto('/');
    await later.getByText(/2 marks kept in this browser, not stored yet/).waitFor();
    await checkAxe(later);
    await takeScreenshot(later, 'home-kept-marks');
    await later
      .getByRole('button', { name: 'Open the bench' })
      .or(later.getByRole('link', { name: 'Open the bench' }))
      .click();
    await later.locator('canvas.picture').waitFor();
    await untilSaid(later, /Kept here, 2 waiting|Saving 2 marks/);
    expect(await markRows(later).count()).toBeGreaterThanOrEqual(2);
    await context.unroute(EVENTS);
    await later.reload();
    await untilSaid(later, /stored/);
    expect((await storedMarks(later, pass)).length).toBe(before + 2);
  });

  test('and are the same in two windows', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    const other = await page.context().newPage();
    await openBenchAt(page, pass, 600_000);
    await openBenchAt(other, pass, 600_000);
    const before = (await storedMarks(page, pass)).length;
    const shown = await markRows(other).count();
    await markNext(page, 'KeyR');
    await expect.poll(() => markRows(other).count()).toBe(shown + 1);
    await untilSaid(page, /stored/);
    const [made] = (await storedMarks(page, pass)).filter(({ startSample }) => startSample >= 600_000);
    await markRows(other).filter({ hasText: 'vessel' }).first().click();
    await other.getByRole('textbox', { name: 'Note' }).fill('from the other window');
    await other.keyboard.press('Tab');
    await untilSaid(other, /stored/);
    await page.bringToFront();
    await page.keyboard.press('Escape');
    await page.keyboard.press('Control+KeyZ');
    await page
      .getByRole('status')
      .filter({ hasText: /Left as it is, since another window changed it|Taken back/ })
      .waitFor();
    await untilSaid(page, /stored/);
    const after = await storedMarks(page, pass);
    expect(after.length).toBe(before + 1);
    expect(after.find(({ id }) => id === made?.id)?.note).toBe('from the other window');
  });

  test('where the session ends in the middle, and go on by themselves after signing in over the page', async ({
    page,
    guard,
  }) => {
    guard.expectAnswer(401, /\/api\//);
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBenchAt(page, pass, 800_000);
    const before = (await storedMarks(page, pass)).length;
    // Otherwise a piece of the picture may ask for the sign-in before the mark is made.
    await page.waitForLoadState('networkidle');
    await endSession(page);
    await markNext(page);
    await page.getByRole('dialog', { name: 'Sign in again to go on' }).waitFor();
    await takeScreenshot(page, 'bench-signed-out');
    await signInOverThePage(page);
    await untilSaid(page, /stored/);
    expect((await storedMarks(page, pass)).length).toBe(before + 1);
  });

  test('and never go out under somebody else who signs in at the same browser', async ({ page, guard }) => {
    guard.expectConsoleError(/ERR_FAILED/);
    guard.expectAnswer(401, /\/api\//);
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBenchAt(page, pass, 1_000_000);
    const before = (await storedMarks(page, pass)).length;
    await page.context().route(EVENTS, (route) => route.abort());
    await markNext(page);
    await untilSaid(page, /Kept here, 1 waiting/);
    const other = await page.context().newPage();
    await signIn(other, 'curator');
    await other.goto('/');
    await other.getByText('1 mark of somebody else who used this browser waits here.').waitFor();
    await page.context().unroute(EVENTS);
    await page.bringToFront();
    await page.getByRole('dialog', { name: 'Sign in again to go on' }).waitFor({ timeout: 40_000 });
    expect((await storedMarks(other, pass)).length).toBe(before);
    await signInOverThePage(page);
    await untilSaid(page, /stored/);
    expect((await storedMarks(page, pass)).length).toBe(before + 1);
  });

  test('where two machines change one mark: other fields are brought together, the same field is asked about', async ({
    page,
    openPage,
    guard,
  }) => {
    guard.expectAnswer(412, /\/api\/events\//);
    await signIn(page, 'labeler');
    const elsewhere = await openPage();
    await signIn(elsewhere, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBenchAt(page, pass, 1_200_000);
    await markNext(page, 'KeyR');
    await untilSaid(page, /stored/);
    await openBenchAt(elsewhere, pass, 1_200_000);
    const [here, there] = [page, elsewhere].map((one) => markRows(one).filter({ hasText: 'vessel' }).last());
    await here?.click();
    await there?.click();
    await elsewhere.getByRole('textbox', { name: 'Note' }).fill('looked at twice');
    await elsewhere.keyboard.press('Tab');
    await untilSaid(elsewhere, /stored/);
    await page.getByRole('combobox', { name: /^Confidence/ }).selectOption('unsure');
    await untilSaid(page, /stored/);
    await expect.poll(() => page.getByRole('textbox', { name: 'Note' }).inputValue()).toBe('looked at twice');
    await page.getByRole('textbox', { name: 'Note' }).fill('mine');
    await page.keyboard.press('Tab');
    await untilSaid(page, /stored/);
    await elsewhere.getByRole('textbox', { name: 'Note' }).fill('theirs');
    await elsewhere.keyboard.press('Tab');
    await untilSaid(elsewhere, /1 mark to decide on/);
    await elsewhere.getByText('there: mine').waitFor();
    await checkAxe(elsewhere);
    await takeScreenshot(elsewhere, 'bench-undecided');
    await elsewhere.getByRole('button', { name: 'Keep mine' }).click();
    await untilSaid(elsewhere, /stored/);
    const marks = await storedMarks(page, pass);
    expect(marks.filter(({ note }) => note === 'theirs')).toMatchObject([{ confidence: 'unsure' }]);
  });

  test('where the server is started anew in the middle', async ({ browser }) => {
    const { dataDir, password } = inject('demoServer');
    const copy = await mkdtemp(path.join(tmpdir(), 'recalesce-restart-'));
    await cp(dataDir, copy, { recursive: true });
    const port = await findFreePort();
    const origin = `http://127.0.0.1:${port}`;
    const settings = {
      NODE_ENV: 'production',
      PORT: String(port),
      RECALESCE_DEMO: '1',
      RECALESCE_HOST: '127.0.0.1',
      RECALESCE_PUBLIC_URL: origin,
      RECALESCE_DATA_DIR: copy,
      RECALESCE_LOG_LEVEL: 'error',
    };
    let stop = await startServer(origin, settings);
    const guard = new PageGuard(origin);
    guard.expectConsoleError(/ERR_CONNECTION_REFUSED|ERR_INCOMPLETE|ERR_EMPTY_RESPONSE|ERR_CONNECTION_RESET/);
    const context = await browser.newContext({ baseURL: origin, viewport: { width: 1280, height: 800 } });
    try {
      await guard.watch(context);
      const page = await context.newPage();
      const headers = { Origin: origin, 'Sec-Fetch-Site': 'same-origin' };
      await page.request.post('/api/sessions', { headers, data: { email: emailOf('labeler'), password } });
      const pass = await requirePass(page, { blind: false });
      await openBenchAt(page, pass, 200_000);
      const before = (await storedMarks(page, pass)).length;
      await markNext(page);
      await stop();
      await markNext(page, 'KeyD');
      await markNext(page, 'KeyS');
      await untilSaid(page, /Kept here, [23] waiting: the server cannot be reached/);
      stop = await startServer(origin, settings);
      await untilSaid(page, /stored/);
      expect((await storedMarks(page, pass)).length).toBe(before + 3);
      guard.verify();
    } finally {
      await context.close();
      await stop();
      await rm(copy, { recursive: true, force: true });
    }
  });
});
