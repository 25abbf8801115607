import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { test } from '../support/browser/test.ts';

async function describeRun(page: Page, title: string): Promise<void> {
  await page.goto('/runs/new');
  await page.getByLabel('Title').fill(title);
  await page.getByRole('textbox', { name: 'Material' }).fill('tin');
  await page.getByLabel('Process', { exact: true }).selectOption({ label: 'bulk freezing' });
}

async function createRun(page: Page, title: string): Promise<void> {
  await describeRun(page, title);
  await page.getByRole('button', { name: 'Create the run' }).click();
  await page.getByRole('heading', { level: 1, name: title }).waitFor();
}

describe('the list of runs', () => {
  test('keeps its filters in the address', async ({ page }) => {
    await signIn(page, 'contributor');
    await page.goto('/runs');
    await page
      .getByRole('combobox', { name: 'Process' })
      .selectOption({ label: 'directional solidification' });
    await page.waitForURL(/process=directional-solidification/);
    const rows = page.locator('tbody tr');
    await rows.filter({ hasText: 'droplet freezing' }).first().waitFor({ state: 'detached' });
    const before = await rows.count();
    await page.reload();
    await rows.first().waitFor();
    expect(await rows.count()).toBe(before);
    expect(await page.getByRole('combobox', { name: 'Process' }).inputValue()).toBe(
      'directional-solidification',
    );
  });

  test('says what to do where nothing matches', async ({ page }) => {
    await signIn(page, 'contributor');
    await page.goto('/runs?q=no-such-alloy');
    await page.getByText('No run matches.').waitFor();
    await page.getByRole('button', { name: 'Show all runs' }).click();
    await page.locator('tbody tr').first().waitFor();
    expect(new URL(page.url()).search).toBe('');
  });

  test.for(['light', 'dark'] as const)('has no violation, %s', async (colorScheme, { openPage }) => {
    const page = await openPage({ colorScheme });
    await signIn(page, 'contributor');
    await page.goto('/runs');
    await page.locator('tbody tr').first().waitFor();
    await checkAxe(page);
    await takeScreenshot(page, `runs-${colorScheme}`);
    await page.locator('tbody a').first().click();
    await page.getByRole('heading', { name: 'Conditions' }).waitFor();
    await page.locator('tbody tr').first().waitFor();
    await checkAxe(page);
    await takeScreenshot(page, `run-${colorScheme}`);
  });
});

describe('the form of a run', () => {
  test('tells at the field what is wrong, and takes unknown for an answer', async ({ page }) => {
    await signIn(page, 'contributor');
    await page.goto('/runs/new');
    await page.getByRole('button', { name: 'Create the run' }).click();
    await page.getByText('Title needs at least 3 characters.').waitFor();
    await page.getByText('Process is needed.').waitFor();
    expect(await page.evaluate(() => document.activeElement?.getAttribute('aria-invalid'))).toBe('true');
    await checkAxe(page);
    await createRun(page, 'Tin in a crucible');
    await page.getByText('unknown').first().waitFor();
  });

  test('shows a caution where the cooling calls for one', async ({ page }) => {
    await signIn(page, 'contributor');
    await page.goto('/runs/new');
    await page.getByLabel('Cooling', { exact: false }).first().fill('liquid nitrogen');
    await page.getByText('Cryogens displace oxygen and burn.').waitFor();
  });

  test('asks before unsaved work is left', async ({ page }) => {
    await signIn(page, 'contributor');
    await describeRun(page, 'Half told');
    await page.getByRole('link', { name: 'Sensors' }).click();
    await page.getByRole('dialog').waitFor();
    await checkAxe(page);
    await page.getByRole('button', { name: 'Stay' }).click();
    expect(await page.getByLabel('Title').inputValue()).toBe('Half told');
    await page.getByRole('link', { name: 'Sensors' }).click();
    await page.getByRole('button', { name: 'Leave, lose the changes' }).click();
    await page.waitForURL(/\/sensors$/);
  });

  test('leaves the choice to the person when somebody else was quicker', async ({ page, guard }) => {
    guard.expectAnswer(412, /\/api\/runs\//);
    await signIn(page, 'contributor');
    await createRun(page, 'Two at one run');
    await page.getByRole('link', { name: 'Edit' }).click();
    await page.getByLabel('Specimen').fill('mine');
    const other = await page.context().newPage();
    await other.goto(page.url());
    await other.getByLabel('Specimen').fill('theirs');
    await other.getByRole('button', { name: 'Save' }).click();
    await other.getByRole('heading', { name: 'Conditions' }).waitFor();
    await page.getByRole('button', { name: 'Save', exact: true }).click();
    await page.getByText('Somebody changed this run while you were at it').waitFor();
    await checkAxe(page);
    await page.getByRole('button', { name: 'Save mine over theirs' }).click();
    await page.getByRole('heading', { name: 'Conditions' }).waitFor();
    await page.locator('dd', { hasText: 'mine' }).waitFor();
  });
});

describe('sensors and set-ups', () => {
  test('are described in forms over the page', async ({ page }) => {
    await signIn(page, 'contributor');
    await page.goto('/sensors');
    await page.getByRole('button', { name: 'New sensor' }).click();
    await page.getByLabel('Name').fill('Contact sensor T');
    await page.getByLabel('Kind').selectOption({ label: 'contact sensor' });
    await page.getByLabel('Lower edge of the band').fill('400 000');
    await page.getByLabel('Upper edge of the band').fill('1e3');
    await page.getByRole('button', { name: 'Create' }).click();
    await page.getByText('must lie above the lower edge').waitFor();
    await checkAxe(page);
    await page.getByLabel('Lower edge of the band').fill('1 000');
    await page.getByLabel('Upper edge of the band').fill('400 000');
    await page.getByRole('button', { name: 'Create' }).click();
    await page.getByRole('rowheader', { name: 'Contact sensor T' }).first().waitFor();
    await page.getByRole('button', { name: 'New set-up' }).click();
    await page.getByLabel('Name').fill('Under the crucible');
    await page.getByLabel('Sensor', { exact: true }).selectOption({ label: 'Contact sensor T' });
    await page.getByLabel('Gain of the preamplifier').fill('40');
    await page.getByLabel('Volts at full scale').fill('10');
    await page.getByRole('button', { name: 'Create' }).click();
    await page
      .getByRole('row', { name: /Under the crucible .*10.V 40.dB/ })
      .first()
      .waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'sensors');
  });
});
