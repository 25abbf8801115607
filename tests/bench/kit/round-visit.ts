import type { Page } from 'playwright-core';
import { launchChromium } from '../../support/browser/chromium.ts';
import { MissingHereError } from './bench.ts';
import type { ServerVisit } from './server-visit.ts';

export interface RoundVisit {
  /** From the press of a key until the next candidate is named and drawn whole, ms. */
  nextMs: number[];
  /** From choosing an order until its first candidate is shown, ms. */
  likenessMs: number;
}

/** As fast as somebody answers who is sure. */
const BETWEEN_MS = 900;
const SETTLE_MS = 3000;
const LONGEST_MS = 60_000;

// Text, since all of it is known in the page alone.
const watchPresses = `(() => {
  const place = () => document.querySelector('[data-round-place]')?.dataset.candidate;
  const isDrawn = () => [...document.querySelectorAll('canvas.picture')].every(({ dataset }) => dataset.drawn === 'whole');
  globalThis.roundMs = [];
  addEventListener('keydown', (event) => {
    if (event.code !== 'KeyJ') return;
    const before = place();
    const look = () => {
      const now = place();
      if (now && now !== before && isDrawn()) globalThis.roundMs.push(performance.now() - event.timeStamp);
      else requestAnimationFrame(look);
    };
    // The picture of the candidate before is whole as well: one frame is left for the new one to begin.
    requestAnimationFrame(() => requestAnimationFrame(look));
  }, true);
})()`;

/** Answers candidates one after another, as somebody does on the bench. */
export async function visitRound(visit: ServerVisit, path: string, times: number): Promise<RoundVisit> {
  const browser = await launchChromium().catch((error: Error) => {
    throw new MissingHereError(`Chromium does not start: ${error.message.split('\n')[0]}`);
  });
  try {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } });
    const [name = '', value = ''] = visit.cookie.split('=');
    await context.addCookies([{ name, value, url: visit.origin }]);
    const page = await context.newPage();
    await page.addInitScript(watchPresses);
    await page.goto(visit.origin + path);
    await page.locator('[data-round-place]').waitFor();
    await page.waitForTimeout(SETTLE_MS);
    for (let n = 0; n < times; n++) {
      await page.keyboard.press('KeyJ');
      await page.waitForTimeout(BETWEEN_MS);
    }
    await page.waitForFunction(`globalThis.roundMs.length >= ${times}`, undefined, { timeout: LONGEST_MS });
    const nextMs = await page.evaluate<number[]>('globalThis.roundMs');
    return { nextMs, likenessMs: await likenessIn(page) };
  } finally {
    await browser.close();
  }
}

async function likenessIn(page: Page): Promise<number> {
  await page.getByText('Order and playing').click();
  const startedMs = performance.now();
  await page.getByLabel('Order', { exact: true }).selectOption('likeness');
  await page.getByRole('heading', { name: /Look-alikes/ }).waitFor({ timeout: LONGEST_MS });
  return performance.now() - startedMs;
}
