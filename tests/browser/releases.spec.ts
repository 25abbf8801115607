import { createHash } from 'node:crypto';
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

const title = 'Sounds of dendritic ice';
const buildLimitMs = 60_000;

async function widthBeyond(page: Page): Promise<number> {
  return page.evaluate('document.documentElement.scrollWidth - innerWidth');
}

async function openRelease(page: Page): Promise<void> {
  await page.goto('/releases');
  await page.getByRole('link', { name: title }).first().click();
  await page.getByRole('heading', { name: 'How to cite this version' }).waitFor();
}

async function openCollection(page: Page): Promise<void> {
  await page.goto('/collections');
  await page.getByRole('link', { name: title }).click();
  await page.getByRole('heading', { name: 'Before a release' }).waitFor();
}

describe('the public pages of the releases', () => {
  test('work without signing in, on a phone and on a desk, in both themes', async ({ openPage }) => {
    for (const colorScheme of ['light', 'dark'] as const) {
      for (const width of [390, 768, 1280]) {
        const page = await openPage({ colorScheme, viewport: { width, height: 800 } });
        await page.goto('/');
        await page.getByRole('heading', { level: 1, name: 'Released data sets' }).waitFor();
        expect(await widthBeyond(page)).toBeLessThanOrEqual(0);
        await checkAxe(page);
        await openRelease(page);
        expect(await widthBeyond(page)).toBeLessThanOrEqual(0);
        await checkAxe(page);
        await takeScreenshot(page, `release-${colorScheme}-${width}`);
        await page.context().close();
      }
    }
  });

  test('show the checksum that the downloaded archive has', async ({ page }) => {
    await openRelease(page);
    const shown = await page.getByRole('group', { name: 'sha256 of the archive' }).innerText();
    const href = await page.getByRole('link', { name: /^Download/ }).getAttribute('href');
    const archive = await page.request.get(href ?? '');
    expect(archive.status()).toBe(200);
    const sum = createHash('sha256')
      .update(await archive.body())
      .digest('hex');
    expect(sum).toBe(shown.trim());
  });
});

describe('a curator', () => {
  test('sees what adding would do, takes a recording out and puts it back', async ({ page }) => {
    await signIn(page, 'curator');
    await openCollection(page);
    await page.getByRole('button', { name: 'Add recordings' }).click();
    await page.getByText(/shared recordings match; \d+ would be added/).waitFor();
    await checkAxe(page);
    await page.getByRole('button', { name: 'Done' }).click();
    const takeOut = page.getByRole('button', { name: /^Take out / });
    await takeOut.first().waitFor();
    const count = await takeOut.count();
    await takeOut.first().click();
    const putBack = page.getByRole('button', { name: 'Put it back' });
    await putBack.waitFor();
    expect(await takeOut.count()).toBe(count - 1);
    await putBack.click();
    await putBack.waitFor({ state: 'detached' });
    expect(await takeOut.count()).toBe(count);
  });

  test('freezes, builds, publishes and withdraws a version', async ({ page }) => {
    await signIn(page, 'curator');
    await openCollection(page);
    const version = await page.getByRole('textbox', { name: 'Version' }).inputValue();
    await page.getByLabel('Notes').fill('The same recordings, with documents put right.');
    await page.getByRole('button', { name: 'Freeze and build' }).click();
    await page
      .getByText(`Version ${version} is built and verified by an independent reader`)
      .waitFor({ timeout: buildLimitMs });
    await checkAxe(page);
    await takeScreenshot(page, 'collection-built');
    await page.getByRole('button', { name: 'Publish' }).click();
    const dialog = page.getByRole('dialog');
    await dialog.getByText('It never changes from then on.').waitFor();
    await checkAxe(page);
    await dialog.getByRole('button', { name: 'Publish it' }).click();
    await page.getByRole('link', { name: version, exact: true }).click();
    await page.getByRole('button', { name: 'Withdraw' }).click();
    await page.getByRole('dialog').getByLabel('Reason').fill('A document in it was wrong again.');
    await page.getByRole('dialog').getByRole('button', { name: 'Withdraw it' }).click();
    await page.getByText('This version was withdrawn').waitFor();
    await page.getByText('A document in it was wrong again.').waitFor();
    expect(await page.getByRole('link', { name: /^Download/ }).count()).toBe(0);
    await page.getByRole('group', { name: 'sha256 of the archive' }).waitFor();
    await checkAxe(page);
    const archive = await page.request.get(`/api${new URL(page.url()).pathname}/archive`);
    expect(archive.status()).toBe(410);
  });

  test('names a collection with a short name proposed from its title', async ({ page }) => {
    await signIn(page, 'curator');
    await page.goto('/collections/new');
    await page.getByLabel('Title').fill('Test of slow brine');
    expect(await page.getByLabel('Short name').inputValue()).toBe('of-slow-brine');
    await page.getByRole('button', { name: 'Create the collection' }).click();
    await page.getByText('Publisher is needed.').waitFor();
    await checkAxe(page);
    await page.getByLabel('Short name').fill('slow-brine');
    await page.getByLabel('Description').fill('Brine that freezes slowly, recorded in a tank.');
    await page.getByLabel('Publisher').fill('Northlight Solidification Lab');
    await page.getByLabel('Contact e-mail').fill('data@northlight.example');
    await page.getByRole('button', { name: 'Create the collection' }).click();
    await page.getByText('Nothing is in this collection yet.').waitFor();
    await checkAxe(page);
  });
});
