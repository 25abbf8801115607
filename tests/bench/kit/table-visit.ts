import type { Page } from 'playwright-core';
import { launchChromium } from '../../support/browser/chromium.ts';
import { MissingHereError } from './bench.ts';
import { framesWhile } from './frames.ts';
import type { ServerVisit } from './server-visit.ts';

export interface TableVisit {
  firstRowsMs: number[];
  slowFramesMs: number[];
  fastFramesMs: number[];
  keyFramesMs: number[];
  rowsInPage: number;
}

const TURNS = 120;
const BETWEEN_TURNS_MS = 16;
const SLOW_PX = 120;
const FAST_PX = 12_000;
const PRESSES = 60;
const SETTLE_MS = 1500;

// Text, since all of it is known in the page alone.
/** From the start of the request until the first row stands in the page; the page is loaded already. */
const watchFirstRows = `(() => {
  globalThis.firstRows = new Promise((resolve) => {
    const look = () => {
      const request = performance.getEntriesByType('resource').find(({ name }) => name.includes('/candidates?'));
      const row = document.querySelector('[role="grid"] [role="gridcell"]');
      if (request && row) resolve(performance.now() - request.startTime);
      else requestAnimationFrame(look);
    };
    look();
  });
})()`;

/** Looks at the table of candidates of a recording as somebody does who scrolls through it. */
export async function visitTable(visit: ServerVisit, path: string, times: number): Promise<TableVisit> {
  const browser = await launchChromium().catch((error: Error) => {
    throw new MissingHereError(`Chromium does not start: ${error.message.split('\n')[0]}`);
  });
  try {
    const context = await browser.newContext({ viewport: { width: 1280, height: 800 } });
    const [name = '', value = ''] = visit.cookie.split('=');
    await context.addCookies([{ name, value, url: visit.origin }]);
    const page = await context.newPage();
    await page.addInitScript(watchFirstRows);
    const firstRowsMs: number[] = [];
    for (let n = 0; n < times; n++) {
      await page.goto(visit.origin + path);
      firstRowsMs.push(await page.evaluate<number>('firstRows'));
    }
    await page.waitForTimeout(SETTLE_MS);
    const slowFramesMs = await framesWhile(page, () => turnWheel(page, SLOW_PX));
    const fastFramesMs = await framesWhile(page, () => turnWheel(page, FAST_PX));
    const keyFramesMs = await framesWhile(page, () => pressPageDown(page));
    const rowsInPage = await page.locator('[role="grid"] [data-rank]').count();
    return { firstRowsMs, slowFramesMs, fastFramesMs, keyFramesMs, rowsInPage };
  } finally {
    await browser.close();
  }
}

async function turnWheel(page: Page, pixels: number): Promise<void> {
  const grid = page.getByRole('grid', { name: 'Candidates' });
  await grid.scrollIntoViewIfNeeded();
  const box = await grid.boundingBox();
  if (!box) throw new Error('The table is not in sight.');
  await page.mouse.move(box.x + box.width / 2, box.y + 120);
  for (let turn = 0; turn < TURNS; turn++) {
    await page.mouse.wheel(0, pixels);
    await page.waitForTimeout(BETWEEN_TURNS_MS);
  }
}

async function pressPageDown(page: Page): Promise<void> {
  await page.locator('[role="grid"] [data-rank][tabindex="0"]').focus();
  for (let press = 0; press < PRESSES; press++) await page.keyboard.press('PageDown');
}
