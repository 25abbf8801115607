import type { Page } from 'playwright-core';
import { launchChromium } from '../../support/browser/chromium.ts';
import { MissingHereError } from './bench.ts';
import type { ServerVisit } from './server-visit.ts';

export interface MarkingVisit {
  /** From the press of a class key until the frame with the new mark is over. */
  markMs: number[];
  /** The same of a row of the table, until the next row has the keyboard. */
  rowMs: number[];
  rowsInPage: number;
}

const SETTLE_MS = 2500;
const BETWEEN_MS = 150;

// Text, since all of it is known in the page alone. A message comes after the frame that a callback belongs to was drawn.
const watchMarks = `(() => {
  const grid = () => document.querySelector('[role="grid"][aria-multiselectable]');
  const state = { mark: () => grid()?.getAttribute('aria-rowcount'), row: () => document.activeElement?.dataset.cell };
  globalThis.timeOf = (what) => new Promise((resolve) => {
    const before = state[what]();
    addEventListener('keydown', (event) => {
      const look = () => {
        if (state[what]() === before) return requestAnimationFrame(look);
        const { port1, port2 } = new MessageChannel();
        port1.onmessage = () => resolve(performance.now() - event.timeStamp);
        port2.postMessage(null);
      };
      requestAnimationFrame(look);
    }, { capture: true, once: true });
  });
})()`;

/** Marks as somebody does who presses a class key at one place after another, with all other marks in view. */
export async function visitMarking(visit: ServerVisit, path: string, times: number): Promise<MarkingVisit> {
  const browser = await launchChromium().catch((error: Error) => {
    throw new MissingHereError(`Chromium does not start: ${error.message.split('\n')[0]}`);
  });
  try {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } });
    const [name = '', value = ''] = visit.cookie.split('=');
    await context.addCookies([{ name, value, url: visit.origin }]);
    const page = await context.newPage();
    await page.addInitScript(watchMarks);
    await page.goto(visit.origin + path);
    await page.locator('canvas.picture').first().waitFor();
    await page.waitForTimeout(SETTLE_MS);
    const markMs: number[] = [];
    for (let n = 0; n < times; n++) {
      await page.keyboard.press('Escape');
      await page.keyboard.press('ArrowRight');
      await page.waitForTimeout(BETWEEN_MS);
      markMs.push(await timeOfPress(page, 'mark', 'KeyF'));
    }
    await page.keyboard.press('Backquote');
    await page.keyboard.press('Control+Home');
    await page.waitForTimeout(SETTLE_MS);
    const rowMs: number[] = [];
    for (let n = 0; n < times; n++) rowMs.push(await timeOfPress(page, 'row', 'PageDown'));
    return { markMs, rowMs, rowsInPage: await page.locator('[role="grid"] [data-key]').count() };
  } finally {
    await browser.close();
  }
}

async function timeOfPress(page: Page, what: 'mark' | 'row', key: string): Promise<number> {
  await page.evaluate(`globalThis.taken = timeOf('${what}'); undefined`);
  await page.keyboard.press(key);
  return page.evaluate<number>('globalThis.taken');
}
