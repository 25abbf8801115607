import type { Page } from 'playwright-core';
import { launchChromium } from '../../support/browser/chromium.ts';
import { MissingHereError } from './bench.ts';
import { framesWhile } from './frames.ts';
import type { ServerVisit } from './server-visit.ts';

export interface PictureVisit {
  /** From the navigation until no part of the picture is empty; the first one without anything in the browser's cache. */
  firstPictureMs: number[];
  /** Until both bands are drawn from the wanted level. */
  wholePictureMs: number[];
  panFramesMs: number[];
  zoomFramesMs: number[];
  /** Frames at which a part of the picture had nothing to show while it was panned and zoomed. */
  emptyFrames: number;
}

/** Keys repeat at about this rate while they are held. */
const REPEAT_MS = 33;
const PRESSES = 150;
const TURNS = 90;
const BETWEEN_TURNS_MS = 16;
const WHEEL_PX = 100;
const SETTLE_MS = 1500;

// Text, since all of it is known in the page alone.
/** From the start of the navigation until the picture says what of it is drawn. */
const watchFirstPicture = `(() => {
  const until = (states) => new Promise((resolve) => {
    const look = () => {
      const drawn = document.querySelector('canvas.picture')?.dataset.drawn;
      if (states.includes(drawn)) resolve(performance.now());
      else requestAnimationFrame(look);
    };
    look();
  });
  globalThis.firstPicture = until(['partly', 'whole']);
  globalThis.wholePicture = until(['whole']);
  globalThis.emptyFrames = 0;
  const count = () => {
    if (document.querySelector('canvas.picture[data-drawn="empty"]')) globalThis.emptyFrames++;
    requestAnimationFrame(count);
  };
  count();
})()`;

/** Looks at the picture of a recording as somebody does who looks for something. */
export async function visitPicture(visit: ServerVisit, id: string, times: number): Promise<PictureVisit> {
  const browser = await launchChromium().catch((error: Error) => {
    throw new MissingHereError(`Chromium does not start: ${error.message.split('\n')[0]}`);
  });
  try {
    const context = await browser.newContext({ viewport: { width: 1440, height: 900 } });
    const [name = '', value = ''] = visit.cookie.split('=');
    await context.addCookies([{ name, value, url: visit.origin }]);
    const page = await context.newPage();
    await page.addInitScript(watchFirstPicture);
    const firstPictureMs: number[] = [];
    const wholePictureMs: number[] = [];
    for (let n = 0; n < times; n++) {
      await page.goto(`${visit.origin}/bench/${id}`);
      firstPictureMs.push(await page.evaluate<number>('firstPicture'));
      wholePictureMs.push(await page.evaluate<number>('wholePicture'));
      await page.waitForTimeout(SETTLE_MS);
    }
    const panFramesMs = await framesAtTwoSeconds(page, visit, id, () => holdKey(page));
    const panEmpty = await page.evaluate<number>('emptyFrames');
    const zoomFramesMs = await framesAtTwoSeconds(page, visit, id, () => turnWheel(page));
    const zoomEmpty = await page.evaluate<number>('emptyFrames');
    return { firstPictureMs, wholePictureMs, panFramesMs, zoomFramesMs, emptyFrames: panEmpty + zoomEmpty };
  } finally {
    await browser.close();
  }
}

/** Begins with two seconds in the first minute. */
async function framesAtTwoSeconds(
  page: Page,
  visit: ServerVisit,
  id: string,
  work: () => Promise<void>,
): Promise<number[]> {
  await page.goto(`${visit.origin}/bench/${id}?from=3840000&to=4224000`);
  await page.evaluate('wholePicture');
  await page.waitForTimeout(SETTLE_MS);
  await page.evaluate('globalThis.emptyFrames = 0');
  return framesWhile(page, work);
}

async function holdKey(page: Page): Promise<void> {
  await page.keyboard.down('Control');
  for (let press = 0; press < PRESSES; press++) {
    await page.keyboard.down('ArrowRight');
    await page.waitForTimeout(REPEAT_MS);
  }
  await page.keyboard.up('ArrowRight');
  await page.keyboard.up('Control');
}

/** Closer to single samples, then away to the whole. */
async function turnWheel(page: Page): Promise<void> {
  const stage = await page.locator('canvas.overlay').boundingBox();
  if (!stage) throw new Error('The picture is not in sight.');
  await page.mouse.move(stage.x + stage.width / 2, stage.y + stage.height / 3);
  for (const pixels of [-WHEEL_PX, WHEEL_PX]) {
    for (let turn = 0; turn < TURNS; turn++) {
      await page.mouse.wheel(0, pixels);
      await page.waitForTimeout(BETWEEN_TURNS_MS);
    }
  }
}
