import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { routes } from '../../src/router/routes.ts';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn, type DemoPerson } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

interface Visit {
  name: string;
  /** Route as the router knows it. */
  route: string;
  /** Address, with the ids of the demo data. */
  address: (page: Page) => Promise<string>;
}

const at = (route: string, name: string): Visit => ({ name, route, address: async () => route });

/** The first item of a list of the interface leads to the address. */
function first(route: string, name: string, list: string, field = 'id'): Visit {
  const address = async (page: Page) => {
    const { items } = (await (await page.request.get(list)).json()) as { items: Record<string, string>[] };
    return route.replace(/:\w+/, items[0]?.[field] ?? 'none');
  };
  return { name, route, address };
}

const visits: Record<DemoPerson | 'nobody', Visit[]> = {
  nobody: [
    at('/sign-in', 'sign-in'),
    { ...at('/setup', 'setup'), address: async () => '/setup?token=no-such-token-at-all-in-here' },
    {
      ...at('/invitations/:token', 'invitation'),
      address: async () => '/invitations/no-such-token-at-all-in-here',
    },
    at('/releases', 'releases'),
    first('/releases/:id', 'release', '/api/releases'),
    { ...at('/:path(.*)*', 'not-found'), address: async () => '/no-such-page' },
  ],
  contributor: [
    at('/', 'home-contributor'),
    at('/runs', 'runs'),
    at('/runs/new', 'run-new'),
    first('/runs/:id', 'run', '/api/runs?q=Cold%20stage%2017'),
    first('/runs/:id/edit', 'run-edit', '/api/runs?q=Cold%20stage%2017'),
    at('/bring-in', 'bring-in'),
    at('/sensors', 'sensors'),
    first('/recordings/:id', 'recording', '/api/recordings?q=coldstage_run-17'),
    first('/bench/:recordingId', 'bench-reading', '/api/recordings?q=coldstage_run-17'),
    at('/tokens', 'tokens'),
  ],
  contributor2: [at('/', 'home-contributor2')],
  labeler: [
    at('/', 'home-labeler'),
    first('/bench/:recordingId', 'bench-marking', '/api/passes?mine=true&state=assigned', 'recordingId'),
  ],
  labeler2: [
    first('/bench/:recordingId', 'bench-silent', '/api/passes?mine=true&state=assigned', 'recordingId'),
  ],
  reviewer: [
    at('/', 'home-reviewer'),
    at('/reviews', 'reviews'),
    first('/reviews/:recordingId', 'review', '/api/reviews', 'recordingId'),
  ],
  curator: [
    at('/', 'home-curator'),
    at('/passes', 'passes'),
    at('/collections', 'collections'),
    at('/collections/new', 'collection-new'),
    first('/collections/:id', 'collection', '/api/collections'),
    first('/collections/:id/edit', 'collection-edit', '/api/collections'),
  ],
  curator2: [at('/', 'home-curator2')],
  administrator: [
    at('/', 'home-administrator'),
    at('/people', 'people'),
    at('/labs', 'labs'),
    at('/audit', 'audit'),
  ],
};

/**
 * Each theme and each width once: what goes wrong with both together has not been seen yet, and costs minutes. A page is loaded
 * once and follows the change, as it has to.
 */
const looks = [
  { colorScheme: 'light', width: 1280 },
  { colorScheme: 'dark', width: 768 },
] as const;

describe('every page', () => {
  test('is visited here', () => {
    const visited = new Set(Object.values(visits).flatMap((list) => list.map((visit) => visit.route)));
    const withView = routes.filter((route) => route.redirect === undefined).map((route) => route.path);
    expect(withView.filter((route) => !visited.has(route))).toEqual([]);
  });

  test(
    'has no violation and fits its width, in both themes',
    { timeout: 300_000 },
    async ({ page, guard }) => {
      guard.expectAnswer(404, /\/api\/invitations\/no-such-token/);
      guard.expectAnswer(410, /\/api\/invitations\/no-such-token/);
      for (const [person, list] of Object.entries(visits)) {
        await page.context().clearCookies();
        if (person !== 'nobody') await signIn(page, person as DemoPerson);
        for (const visit of list) await look(page, visit);
      }
    },
  );
});

async function look(page: Page, visit: Visit): Promise<void> {
  await page.goto(await visit.address(page));
  await page.getByRole('heading', { level: 1 }).first().waitFor();
  for (const { colorScheme, width } of looks) {
    await page.emulateMedia({ colorScheme });
    await page.setViewportSize({ width, height: 900 });
    await page.waitForLoadState('networkidle');
    const beyond: number = await page.evaluate('document.documentElement.scrollWidth - innerWidth');
    expect(beyond, `${visit.name} scrolls sideways`).toBeLessThanOrEqual(0);
    await checkAxe(page);
    await takeScreenshot(page, `page-${visit.name}-${colorScheme}-${width}`);
  }
}
