import { readFileSync } from 'node:fs';
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

const heading = 'Temperature, pressure and current';

async function openRun(page: Page, title: string): Promise<void> {
  const answer = await page.request.get(`/api/runs?q=${encodeURIComponent(title)}`);
  const { items } = (await answer.json()) as { items: { id: string }[] };
  await page.goto(`/runs/${items[0]?.id}`);
  await page.getByRole('heading', { level: 1, name: title }).waitFor();
}

describe('the traces of a run', () => {
  test.for(['light', 'dark'] as const)(
    'are drawn with what looks like recalescence, %s',
    async (colorScheme, { openPage }) => {
      const page = await openPage({ colorScheme });
      await signIn(page, 'contributor');
      await openRun(page, 'Cold stage 17');
      const section = page.getByRole('region', { name: heading });
      await section.getByText('Recalescence, offered as nucleation.').waitFor();
      await section.getByText(/consistent with about 16 % of the water frozen in the flash/).waitFor();
      expect(await section.getByRole('img').getAttribute('aria-label')).toContain(
        "5\u00A0min\u00A020\u00A0s before the run's zero",
      );
      await section.scrollIntoViewIfNeeded();
      await checkAxe(page);
      await takeScreenshot(page, `run-traces-${colorScheme}`);
    },
  );

  test('are added from the file of a logger, removed, and taken back', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRun(page, 'Cold stage 22');
    const section = page.getByRole('region', { name: heading });
    await section.getByRole('button', { name: 'Add a trace' }).click();
    const dialog = page.getByRole('dialog');
    await dialog.locator('input[type=file]').setInputFiles({
      name: 'logger.csv',
      mimeType: 'text/csv',
      buffer: readFileSync('fixtures/traces/logger.csv'),
    });
    await dialog.getByText(/501\u00A0rows/).waitFor();
    expect(await dialog.getByLabel('Column of values', { exact: true }).inputValue()).toBe('1');
    expect(await dialog.getByLabel('Decimal sign', { exact: true }).inputValue()).toBe('comma');
    await dialog.getByLabel('Decimal sign', { exact: true }).selectOption('point');
    await dialog.getByText('have decimal commas').waitFor();
    await checkAxe(page);
    await dialog.getByLabel('Decimal sign', { exact: true }).selectOption('comma');
    await dialog.getByText(/501\u00A0rows/).waitFor();
    await dialog.getByRole('textbox', { name: /^Run time of the first row/ }).fill('-57');
    await takeScreenshot(page, 'run-traces-dialog');
    await dialog.getByRole('button', { name: 'Add the trace' }).click();
    await section.getByText('Recalescence, offered as nucleation.').waitFor();
    await section
      .getByText(/57\u00A0s before the run's zero/)
      .first()
      .waitFor();
    await section.getByRole('button', { name: 'Remove logger' }).click();
    await section.getByText('logger was removed.').waitFor();
    await section.getByText('No traces yet.').waitFor();
    await section.getByRole('button', { name: 'Take it back' }).click();
    await section.getByRole('row', { name: /logger/ }).waitFor();
    await checkAxe(page);
  });

  test('are none for a labeler in a blind pass on that run', async ({ page }) => {
    await signIn(page, 'labeler');
    const runs = await page.request.get('/api/runs?q=Flask%2004');
    const { items } = (await runs.json()) as { items: { id: string }[] };
    expect(items).toHaveLength(1);
    const traces = await page.request.get(`/api/runs/${items[0]?.id}/traces`);
    expect(await traces.json()).toEqual({ items: [] });
  });
});
