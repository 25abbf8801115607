import type { Page } from 'playwright-core';

export interface ChosenFile {
  name: string;
  mimeType: string;
  buffer: Buffer;
}

/** The page with everything told that is told once for all files. */
export async function openForm(page: Page): Promise<void> {
  await page.goto('/bring-in');
  await page.getByLabel('Run', { exact: true }).selectOption({ index: 1 });
  await page.getByLabel('Set-up', { exact: true }).selectOption({ index: 1 });
  await page.getByLabel('Licence', { exact: true }).selectOption('CC-BY-4.0');
}

export async function choose(page: Page, ...files: ChosenFile[]): Promise<void> {
  await page.locator('input[type=file]').setInputFiles(files);
}
