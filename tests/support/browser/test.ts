import type { Browser, BrowserContext, BrowserContextOptions, Page } from 'playwright-core';
import { inject, test as base } from 'vitest';
import { launchChromium } from './chromium.ts';
import { PageGuard } from './page-guard.ts';

interface BrowserFixtures {
  browser: Browser;
  /** What the browser may not complain about; checked at the end of each test that has a page. */
  guard: PageGuard;
  /** Opens a further page in a context of its own: another person, another width, the dark theme. */
  openPage: (options?: BrowserContextOptions) => Promise<Page>;
  /** A page of 1280 x 800 pixels, nobody signed in, addresses relative to the server. */
  page: Page;
}

const defaults: BrowserContextOptions = { viewport: { width: 1280, height: 800 }, locale: 'en-GB' };

/** The test function of all browser specs. */
export const test = base.extend<BrowserFixtures>({
  browser: [
    async ({}, use) => {
      const browser = await launchChromium();
      await use(browser);
      await browser.close();
    },
    { scope: 'file' },
  ],
  guard: async ({}, use) => {
    await use(new PageGuard(inject('demoServer').origin));
  },
  openPage: async ({ browser, guard }, use) => {
    const contexts: BrowserContext[] = [];
    await use(async (options = {}) => {
      const baseURL = inject('demoServer').origin;
      const context = await browser.newContext({ ...defaults, baseURL, ...options });
      contexts.push(context);
      await guard.watch(context);
      return context.newPage();
    });
    await Promise.all(contexts.map((context) => context.close()));
    guard.verify();
  },
  page: async ({ openPage }, use) => {
    await use(await openPage());
  },
});
