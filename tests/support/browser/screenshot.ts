import path from 'node:path';
import type { Page } from 'playwright-core';

const folder = path.resolve(import.meta.dirname, '../../../.setup/screenshots');

/** Keeps a picture of the whole page as `.setup/screenshots/<name>.png`, a folder that git ignores. */
export async function takeScreenshot(page: Page, name: string): Promise<void> {
  await page.screenshot({ path: path.join(folder, `${name}.png`), fullPage: true });
}
