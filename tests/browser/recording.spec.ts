import type { Locator, Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { requirePass } from '../support/browser/bench-page.ts';
import { bringIn, longNoise } from '../support/browser/bring-in.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { test } from '../support/browser/test.ts';

async function openRecording(page: Page, fileName: string): Promise<void> {
  const answer = await page.request.get('/api/recordings?limit=200');
  const { items } = (await answer.json()) as { items: { id: string; fileName: string }[] };
  const id = items.find((item) => item.fileName === fileName)?.id;
  expect(id, fileName).toBeDefined();
  await page.goto(`/recordings/${id}`);
  await page.getByRole('heading', { name: 'What this file is' }).waitFor();
}

function candidateRows(page: Page): Locator {
  return page.getByRole('grid', { name: 'Candidates' }).locator('[data-rank]');
}

/** Colours in the canvas of a plot: one that drew nothing has a single one. */
async function coloursDrawn(page: Page, name: RegExp): Promise<number> {
  const canvas = page.getByRole('img', { name }).locator('canvas');
  await canvas.waitFor();
  return canvas.evaluate((element: HTMLCanvasElement) => {
    const data = element.getContext('2d')?.getImageData(0, 0, element.width, element.height).data ?? [];
    const colours = new Set<string>();
    for (let place = 0; place < data.length; place += 4)
      colours.add(`${data[place]},${data[place + 1]},${data[place + 2]}`);
    return colours.size;
  });
}

describe('the page of a recording', () => {
  test.for(['light', 'dark'] as const)(
    'draws its plots and has no violation, %s',
    async (colorScheme, { openPage }) => {
      const page = await openPage({ colorScheme });
      await signIn(page, 'contributor');
      await openRecording(page, 'coldstage_run-17.wav');
      await page.getByRole('heading', { level: 1, name: /candidates, .*hearing line/ }).waitFor();
      await page.getByText('as this sensor sees it').first().waitFor();
      expect(await coloursDrawn(page, /^Power density over frequency/)).toBeGreaterThan(5);
      expect(await coloursDrawn(page, /^Noise floor by third octaves/)).toBeGreaterThan(5);
      expect(await coloursDrawn(page, /^Level through the recording/)).toBeGreaterThan(2);
      expect(await coloursDrawn(page, /^Candidates per step/)).toBeGreaterThan(2);
      await candidateRows(page).first().waitFor();
      await checkAxe(page);
      await takeScreenshot(page, `recording-${colorScheme}`);
    },
  );

  test('tells the spectrum in figures as well', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17.wav');
    await page.getByText('The spectrum as a table').click();
    await page.getByRole('rowheader', { name: /^20.kHz$/ }).waitFor();
    await checkAxe(page);
  });

  test('draws median, mean and maximum of the spectrum when asked, by keyboard too', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17.wav');
    const before = await coloursDrawn(page, /^Power density over frequency/);
    const median = page.getByRole('checkbox', { name: 'median' });
    await median.focus();
    await page.keyboard.press('Space');
    await page.getByRole('checkbox', { name: 'mean' }).check();
    await page.getByRole('checkbox', { name: 'maximum' }).check();
    await expect.poll(() => coloursDrawn(page, /^Power density over frequency/)).not.toBe(before);
    expect(await median.isChecked()).toBe(true);
    await page.getByText('The bands as a table').click();
    await page.getByRole('rowheader', { name: /^1\.6.kHz$/ }).waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'recording-curves');
  });

  test('leads from the place of a finding to the bench', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-19_gain-too-high.wav');
    const links = page.getByRole('list', { name: 'Places on the bench' }).getByRole('link');
    expect(await links.first().getAttribute('href')).toMatch(/^\/bench\/[0-9a-f-]{36}\?from=\d+&to=\d+$/);
    await page.getByText('places of cautions and faults').waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'recording-findings');
  });

  test('tells the stretches in which candidates are frequent, each a way to the bench', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'AlSi7_plate_03.wav');
    const link = page.getByRole('table', { name: 'Active spans' }).getByRole('link').first();
    await page.getByText('along the candidates: active spans').waitFor();
    await link.focus();
    await page.keyboard.press('Enter');
    await page.waitForURL(/\/bench\/[0-9a-f-]{36}\?from=\d+&to=\d+$/);
    await page
      .getByRole('img', { name: /spectrogram|picture/i })
      .first()
      .waitFor();
  });

  test('filters and orders candidates in the address, and leads to their place on the bench', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17.wav');
    const rows = candidateRows(page);
    await page.getByLabel('Hearing line').selectOption({ label: 'below it' });
    await page.waitForURL(/hearing=below/);
    await rows.filter({ hasText: 'above' }).first().waitFor({ state: 'detached' });
    await page.getByRole('button', { name: 'Over noise' }).click();
    await page.waitForURL(/order=-snrDb/);
    await page
      .getByRole('columnheader', { name: 'Over noise' })
      .and(page.locator('[aria-sort="descending"]'))
      .waitFor();
    await rows.first().getByRole('link').waitFor();
    const href = await rows.first().getByRole('link').getAttribute('href');
    expect(href).toMatch(/^\/bench\/[0-9a-f-]{36}\?from=\d+&to=\d+$/);
  });

  test('says why ultrasound cannot be observed', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'freezer-phone_2026-01-19.wav');
    await page.getByRole('heading', { level: 1, name: /ultrasound cannot be observed/i }).waitFor();
    await takeScreenshot(page, 'recording-not-observable');
  });

  test('says what it means to be held, and why, to its own lab', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'tank-09_96k.wav');
    await page.getByText('Nobody outside the lab sees or hears it').waitFor();
    await page.getByRole('heading', { name: 'What a reviewer looks at' }).waitFor();
    await checkAxe(page);
  });

  test('lets a curator give a pass and take it back', async ({ page }) => {
    await signIn(page, 'curator');
    await openRecording(page, 'coldstage_run-19_gain-too-high.wav');
    await page.getByRole('button', { name: 'Assign a pass' }).click();
    await page.getByLabel('Labeler').selectOption({ index: 1 });
    await page.getByLabel('Instructions').fill('Only the first ten seconds.');
    await checkAxe(page);
    await page.getByRole('button', { name: 'Assign', exact: true }).click();
    const takeBack = page.getByRole('button', { name: /^Take back the pass of/ });
    await page.getByRole('dialog').waitFor({ state: 'hidden' });
    await takeBack.first().waitFor();
    await checkAxe(page);
    const before = await takeBack.count();
    await takeBack.first().click();
    await expect.poll(() => takeBack.count()).toBe(before - 1);
  });

  test('withholds from whoever works blind what would lead them, and says why', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: true });
    await openRecording(page, pass.recordingName);
    await page.getByRole('heading', { level: 1, name: 'You work blind on this recording' }).waitFor();
    expect(await page.getByRole('heading', { name: /^Candidates/ }).count()).toBe(0);
    expect(await page.getByRole('table', { name: 'Active spans' }).count()).toBe(0);
    await checkAxe(page);
    await takeScreenshot(page, 'recording-blind');
  });

  test('turns into the measurements while one watches', async ({ page }) => {
    await signIn(page, 'contributor');
    // Those ahead of it keep the machine busy, so that it is seen waiting however quick the machine is.
    await bringIn(page, 'ahead.wav', longNoise(240, 12));
    const id = await bringIn(page, 'watched.wav', longNoise(30, 13));
    await page.goto(`/recordings/${id}`);
    await page.getByRole('heading', { level: 1, name: /^(Waits to be|Is being) measured$/ }).waitFor();
    await page.getByRole('progressbar', { name: 'Measured' }).waitFor();
    await checkAxe(page);
    await page.getByRole('heading', { name: 'Through the recording' }).waitFor({ timeout: 90_000 });
    await page.getByRole('img', { name: /^Power density/ }).waitFor();
  });

  test('fits a tablet', async ({ openPage }) => {
    const page = await openPage({ viewport: { width: 768, height: 1000 } });
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17.wav');
    await candidateRows(page).first().waitFor();
    const overflowPx = await page.evaluate(
      () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
    );
    expect(overflowPx).toBe(0);
    await takeScreenshot(page, 'recording-768');
  });
});
