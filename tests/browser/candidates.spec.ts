import { readFile } from 'node:fs/promises';
import type { Locator, Page } from 'playwright-core';
import { describe, expect, inject } from 'vitest';
import type { CandidatesPage } from '../../shared/contract/candidates.ts';
import { checkAxe } from '../support/browser/axe.ts';
import { bringIn } from '../support/browser/bring-in.ts';
import { seedManyCandidates } from '../support/browser/many-candidates.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { test } from '../support/browser/test.ts';

const count = 100_000;
/** Generous: a machine that is busy with other things is several times slower. */
const longestMs = 2000;
/** What a table that holds only the rows in sight stays below. */
const mostRowsInPage = 60;

let seeded: Promise<string> | undefined;

async function bringInAndMeasure(page: Page): Promise<string> {
  const id = await bringIn(page, 'many-candidates.wav');
  await expect
    .poll(
      async () => {
        const answer = await page.request.get(`/api/recordings/${id}`);
        return ((await answer.json()) as { processing: string }).processing;
      },
      { timeout: 90_000, interval: 500 },
    )
    .toBe('measured');
  seedManyCandidates(inject('demoServer').dataDir, id, count);
  return id;
}

/** Opens the one recording of this file with its many candidates. */
async function openMany(page: Page, query = ''): Promise<string> {
  await signIn(page, 'contributor');
  seeded ??= bringInAndMeasure(page);
  const id = await seeded;
  await page.goto(`/recordings/${id}${query}`);
  await rowsOf(page).first().getByRole('link').waitFor();
  return id;
}

function gridOf(page: Page): Locator {
  return page.getByRole('grid', { name: 'Candidates' });
}

function rowsOf(page: Page): Locator {
  return gridOf(page).locator('[data-rank]');
}

function rowAt(page: Page, rank: number): Locator {
  return gridOf(page).locator(`[data-rank="${rank}"]`);
}

async function list(page: Page, id: string, query: string): Promise<CandidatesPage> {
  return (await (
    await page.request.get(`/api/recordings/${id}/candidates?${query}`)
  ).json()) as CandidatesPage;
}

function heldRank(page: Page): Promise<string | undefined> {
  return page.evaluate(() => (document.activeElement as HTMLElement | null)?.dataset['rank']);
}

describe('a recording with 100,000 candidates', () => {
  test('shows its first rows at once, and holds few rows in the page', async ({ page }) => {
    const id = await openMany(page);
    await page.goto('/');
    await page.getByRole('heading', { level: 1 }).waitFor();
    await page.goto(`/recordings/${id}`);
    await page.getByRole('heading', { name: 'Candidates one by one' }).waitFor();
    const startedMs = performance.now();
    await rowsOf(page).first().getByRole('link').waitFor();
    expect(performance.now() - startedMs).toBeLessThan(longestMs);
    expect(await gridOf(page).getAttribute('aria-rowcount')).toBe(String(count + 1));
    expect(await rowsOf(page).count()).toBeLessThan(mostRowsInPage);
  });

  test('scrolls to its end by keyboard, with the keys in the row that is told', async ({ page }) => {
    const id = await openMany(page);
    await rowAt(page, 0).focus();
    await page.keyboard.press('PageDown');
    await page.keyboard.press('ArrowDown');
    expect(Number(await heldRank(page))).toBeGreaterThan(5);
    await page.keyboard.press('End');
    expect(await heldRank(page)).toBe(String(count - 1));
    const last = rowAt(page, count - 1);
    await last.getByRole('link').waitFor();
    expect(await last.getAttribute('aria-rowindex')).toBe(String(count + 1));
    const { items } = await list(page, id, `rank=${count - 1}&limit=1`);
    expect(await last.getByRole('link').getAttribute('href')).toContain(`/bench/${id}?from=`);
    expect(items[0]?.ordinal).toBe(count - 1);
    expect(await rowsOf(page).count()).toBeLessThan(mostRowsInPage);
    await page.keyboard.press('Home');
    expect(await heldRank(page)).toBe('0');
  });

  test('scrolls to its end by the wheel, and the row in hand stays in hand', async ({ page }) => {
    await openMany(page);
    await rowAt(page, 2).click({ position: { x: 300, y: 10 } });
    const box = await gridOf(page).boundingBox();
    if (!box) throw new Error('The table is not in sight.');
    await page.mouse.move(box.x + 100, box.y + 200);
    for (let turn = 0; turn < 60; turn++) await page.mouse.wheel(0, 100_000);
    await rowAt(page, count - 1)
      .getByRole('link')
      .waitFor();
    expect(await rowsOf(page).count()).toBeLessThan(mostRowsInPage);
    expect(await rowAt(page, 2).getAttribute('aria-selected')).toBe('true');
    expect(await rowsOf(page).locator('xpath=self::*[@aria-selected="true"]').count()).toBe(1);
  });

  test('is put in another order by a heading', async ({ page }) => {
    const id = await openMany(page);
    await gridOf(page).getByRole('button', { name: 'Over noise' }).click();
    await page.waitForURL(/order=-snrDb/);
    const heading = gridOf(page).getByRole('columnheader', { name: 'Over noise' });
    expect(await heading.getAttribute('aria-sort')).toBe('descending');
    const { items } = await list(page, id, 'sort=-snrDb&limit=1');
    const strongest = items[0];
    if (!strongest) throw new Error('There is no candidate.');
    const { onsetSample, endSample } = strongest;
    await expect
      .poll(async () => {
        const href = (await rowAt(page, 0).getByRole('link').getAttribute('href')) ?? '';
        const [from = 0, to = 0] = [...href.matchAll(/=(\d+)/g)].map(([, digits]) => Number(digits));
        return from <= onsetSample && to >= endSample;
      })
      .toBe(true);
  });

  test('narrows to what the filters leave, and says so in words', async ({ page }) => {
    const id = await openMany(page);
    await page.getByLabel('Hearing line').selectOption({ label: 'above it' });
    await page.getByLabel('Over noise, at least').fill('30');
    await page.waitForURL(/hearing=above&snr=30/);
    const { total } = await list(page, id, 'hearingClass=above&leastSnrDb=30&limit=1');
    expect(total.count).toBeGreaterThan(100);
    await expect.poll(() => gridOf(page).getAttribute('aria-rowcount')).toBe(String(total.count + 1));
    await page.getByText('above the hearing line, at least 30\u00A0dB over noise.').waitFor();
    await rowsOf(page).first().getByText('above').waitFor();
    await page.getByRole('button', { name: 'Take the filters away' }).click();
    await expect.poll(() => gridOf(page).getAttribute('aria-rowcount')).toBe(String(count + 1));
  });

  test('says which filters leave nothing', async ({ page }) => {
    await signIn(page, 'contributor');
    seeded ??= bringInAndMeasure(page);
    await page.goto(`/recordings/${await seeded}?snr=150`);
    await page.getByText('None that fits the filters').waitFor();
    await checkAxe(page);
    await page.getByRole('button', { name: 'Take them all away' }).click();
    await rowsOf(page).first().getByRole('link').waitFor();
  });

  test('goes to a place in time that the strip is led to by keyboard', async ({ page }) => {
    const id = await openMany(page, '?order=-snrDb');
    const strip = page.getByRole('slider', { name: 'Place in time that the table shows' });
    await strip.focus();
    for (let press = 0; press < 10; press++) await page.keyboard.press('PageUp');
    await page.waitForURL((address) => !address.searchParams.has('order'));
    const inHand = gridOf(page).locator('[data-rank][aria-selected="true"]');
    await expect.poll(async () => Number(await inHand.getAttribute('data-rank'))).toBeGreaterThan(40_000);
    const rank = Number(await inHand.getAttribute('data-rank'));
    await inHand.getByRole('link').waitFor();
    const said = (await strip.getAttribute('aria-valuetext')) ?? '';
    const { items } = await list(page, id, `rank=${rank}&limit=1`);
    expect(Number.parseFloat(said)).toBeCloseTo(items[0]?.onsetS ?? 0, 0);
  });

  test('opens the bench at a row, and comes back to it', async ({ page }) => {
    const id = await openMany(page, '?order=-snrDb');
    await rowAt(page, 0).focus();
    for (let press = 0; press < 4; press++) await page.keyboard.press('PageDown');
    const rank = Number(await heldRank(page));
    await rowAt(page, rank).getByRole('link').waitFor();
    await page.keyboard.press('Enter');
    await page.waitForURL(new RegExp(`/bench/${id}\\?from=\\d+&to=\\d+`));
    await page.goBack();
    await page.waitForURL(/order=-snrDb/);
    await rowAt(page, rank).getByRole('link').waitFor();
    expect(await rowAt(page, rank).getAttribute('aria-selected')).toBe('true');
  });

  test('shows on the bench how they lie, and one by one as soon as they can be told apart', async ({
    page,
  }) => {
    const id = await openMany(page);
    await page.goto(`/bench/${id}`);
    await page.getByText('in the part that is shown: the picture tells how they lie').waitFor();
    await page.keyboard.press('o');
    await page.getByText('Too many candidates in view: zoom in').waitFor({ state: 'attached' });
    await takeScreenshot(page, 'bench-many-candidates');
    await page.goto(`/bench/${id}?from=2000000&to=2010000`);
    const listed = page.getByRole('group', { name: 'Candidates in the part that is shown' });
    await listed.locator('tbody tr').first().waitFor();
    await checkAxe(page);
  });

  test('gives all of its candidates as a table', async ({ page }) => {
    await openMany(page);
    const [download] = await Promise.all([
      page.waitForEvent('download'),
      page.getByRole('link', { name: 'All candidates, as a table' }).click(),
    ]);
    expect(download.suggestedFilename()).toBe('many-candidates.wav.candidates.csv');
    const text = await readFile(await download.path(), 'utf8');
    expect(text.trimEnd().split('\r\n')).toHaveLength(count + 1);
  });

  test.for(['light', 'dark'] as const)('has no violation, %s', async (colorScheme, { openPage }) => {
    const page = await openPage({ colorScheme });
    await openMany(page, '?hearing=above');
    await rowAt(page, 0).focus();
    await page.keyboard.press('PageDown');
    await checkAxe(page);
    await takeScreenshot(page, `candidates-${colorScheme}`);
  });

  test('fits a phone', async ({ openPage }) => {
    const page = await openPage({ viewport: { width: 390, height: 844 } });
    await openMany(page);
    const overflowPx = await page.evaluate(
      () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
    );
    expect(overflowPx).toBe(0);
    await checkAxe(page);
  });
});
