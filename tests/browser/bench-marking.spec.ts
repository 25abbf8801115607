import type { Locator, Page } from 'playwright-core';
import { describe, expect, inject } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

interface Facts {
  id: string;
  recordingId: string;
  frames: number;
}

type OpenPage = () => Promise<Page>;

let given: Promise<Facts> | undefined;

async function getJson<Body>(page: Page, address: string): Promise<Body> {
  return (await (await page.request.get(address)).json()) as Body;
}

/** A pass of this file alone, on a recording that no other open pass of the labeler is of. */
async function givePass(page: Page, openPage: OpenPage): Promise<Facts> {
  const { origin } = inject('demoServer');
  const { items } = await getJson<{ items: { recordingId: string }[] }>(
    page,
    '/api/passes?mine=true&state=assigned',
  );
  const { user } = await getJson<{ user: { id: string } }>(page, '/api/sessions/current');
  const curator = await openPage();
  await signIn(curator, 'curator');
  const list = await getJson<{
    items: { id: string; frames: number; candidateCount: number; sharing: string }[];
  }>(curator, '/api/recordings?limit=100');
  const taken = new Set(items.map(({ recordingId }) => recordingId));
  const free = list.items.filter(
    ({ id, sharing, candidateCount }) => !taken.has(id) && sharing === 'shared' && candidateCount > 12,
  );
  for (const { id: recordingId, frames } of free) {
    const answer = await curator.request.post('/api/passes', {
      headers: { Origin: origin, 'Sec-Fetch-Site': 'same-origin' },
      data: { recordingId, labelerId: user.id, blind: false },
    });
    if (answer.ok()) return { id: ((await answer.json()) as { id: string }).id, recordingId, frames };
  }
  throw new Error('The demo has no recording on which the labeler could be given a pass.');
}

async function openBench(page: Page, openPage: OpenPage, query = ''): Promise<Facts> {
  await signIn(page, 'labeler');
  given ??= givePass(page, openPage);
  const pass = await given;
  await page.goto(`/bench/${pass.recordingId}?pass=${pass.id}${query}`);
  await page.locator('canvas.picture').first().waitFor();
  await page.waitForLoadState('networkidle');
  return pass;
}

async function untilStored(page: Page): Promise<void> {
  await page
    .locator('[data-saving]')
    .filter({ hasText: /stored/ })
    .waitFor();
}

function grid(page: Page): Locator {
  return page.getByRole('grid', { name: 'Marks' });
}

async function countMarks(page: Page): Promise<number> {
  if ((await grid(page).count()) === 0) return 0;
  return Number(await grid(page).getAttribute('aria-rowcount')) - 1;
}

/** Presses keys and says how many they were. */
async function pressAll(page: Page, keys: readonly string[]): Promise<number> {
  for (const key of keys) await page.keyboard.press(key);
  return keys.length;
}

async function selectedCount(page: Page): Promise<number> {
  return grid(page).locator('[role="row"][aria-selected="true"]').count();
}

function onset(page: Page): Promise<string | null> {
  return page.locator('[data-onset]').textContent();
}

describe('marking', () => {
  test('sets ten clicks with two keys each, by the keyboard alone', async ({ page, openPage }) => {
    await openBench(page, openPage);
    const before = await countMarks(page);
    let keys = 0;
    await page.keyboard.press('Digit0');
    for (let zooms = 0; zooms < 12; zooms++) {
      if (
        (await page
          .getByRole('group', { name: /Candidates in the part/ })
          .locator('tbody tr')
          .count()) > 0
      )
        break;
      await page.keyboard.press('ArrowUp');
      await page.waitForTimeout(500);
    }
    for (let mark = 0; mark < 10; mark++)
      keys += await pressAll(page, ['KeyO', mark % 2 === 0 ? 'KeyF' : 'Shift+KeyD']);
    await untilStored(page);
    expect(await countMarks(page)).toBe(before + 10);
    expect(keys / 10).toBeLessThanOrEqual(2);
    await page.keyboard.press('Control+KeyA');
    const shown = await page.getByRole('heading', { name: /marks selected/ }).textContent();
    expect(shown).toMatch(/selected/);
    await checkAxe(page);
    await takeScreenshot(page, 'bench-several');
    await page.keyboard.press('Delete');
    await page.keyboard.press('Control+KeyZ');
    await untilStored(page);
    expect(await countMarks(page)).toBe(before + 10);
  });

  test('sets ten clicks with the mouse alone', async ({ page, openPage }) => {
    await openBench(page, openPage, '&from=0&to=60000');
    const before = await countMarks(page);
    const stage = await page.locator('canvas.overlay').boundingBox();
    if (!stage) throw new Error('The stage is not there.');
    const lane = page.getByRole('toolbar', { name: 'Probable cause' });
    for (let mark = 0; mark < 10; mark++) {
      await page.mouse.click(stage.x + 120 + mark * 60, stage.y + 90);
      await lane.getByRole('button', { name: /bubble/ }).click();
    }
    await untilStored(page);
    expect(await countMarks(page)).toBe(before + 10);
    await page.keyboard.down('Shift');
    await page.mouse.move(stage.x + 100, stage.y + 60);
    await page.mouse.down();
    await page.mouse.move(stage.x + 120 + 9.5 * 60, stage.y + 160, { steps: 6 });
    await page.mouse.up();
    await page.keyboard.up('Shift');
    await page.getByRole('heading', { name: /1\d marks selected/ }).waitFor();
    await page.getByLabel('Class').selectOption('vessel-tick');
    await page.getByRole('button', { name: 'Delete' }).click();
    await untilStored(page);
    expect(await countMarks(page)).toBe(before);
  });

  test('moves a start to the onset that is picked, back to where it was put, and says how well it is known', async ({
    page,
    openPage,
  }) => {
    const pass = await openBench(page, openPage);
    const { items } = await getJson<{ items: { onsetSample: number }[] }>(
      page,
      `/api/recordings/${pass.recordingId}/candidates?limit=3&sort=-snrDb`,
    );
    const at = items[0]?.onsetSample ?? 0;
    await openBench(page, openPage, `&from=${at - 4000}&to=${at + 4000}`);
    await page.keyboard.press('KeyF');
    await page.keyboard.press('KeyI');
    const put = await onset(page);
    expect(put).toMatch(/\u00B1.+by the zoom it was set at/);
    await page.keyboard.press('KeyY');
    await page
      .locator('[data-onset]')
      .filter({ hasText: /picker/ })
      .waitFor();
    await untilStored(page);
    await takeScreenshot(page, 'bench-snapped');
    await page.keyboard.press('Shift+KeyY');
    await page.locator('[data-onset]').filter({ hasText: /zoom/ }).waitFor();
    expect(await onset(page)).toBe(put);
    await page.keyboard.press('Control+KeyZ');
    await page
      .locator('[data-onset]')
      .filter({ hasText: /picker/ })
      .waitFor();
    await page.keyboard.press('Delete');
    await untilStored(page);
  });

  test('splits a mark at the cursor, makes it one again, and takes both back', async ({ page, openPage }) => {
    await openBench(page, openPage, '&from=100000&to=101000');
    const before = await countMarks(page);
    await page.keyboard.press('KeyS');
    for (let presses = 0; presses < 40; presses++) await page.keyboard.press('Shift+Period');
    for (let presses = 0; presses < 10; presses++) await page.keyboard.press('Shift+ArrowRight');
    await page.keyboard.press('Slash');
    expect(await countMarks(page)).toBe(before + 2);
    expect(await selectedCount(page)).toBe(2);
    await page.keyboard.press('Shift+KeyM');
    expect(await countMarks(page)).toBe(before + 1);
    await pressAll(page, ['Control+KeyZ', 'Control+KeyZ']);
    expect(await countMarks(page)).toBe(before + 1);
    await page.getByText('Last changes', { exact: true }).click();
    await page.getByRole('button', { name: 'before the first change' }).click();
    await untilStored(page);
    expect(await countMarks(page)).toBe(before);
  });

  test('opens the bench at a mark by its link, and says where there is none', async ({ page, openPage }) => {
    const pass = await openBench(page, openPage, '&from=200000&to=210000');
    await page.context().grantPermissions(['clipboard-read', 'clipboard-write']);
    await page.keyboard.press('KeyA');
    await untilStored(page);
    const words = await onset(page);
    await page.keyboard.press('Control+Alt+KeyL');
    await page
      .locator('[data-link-words]')
      .filter({ hasText: /copied/ })
      .waitFor();
    const link = await page.evaluate(() => navigator.clipboard.readText());
    expect(link).toMatch(/\/bench\/.+\?mark=.+&from=200000&to=210000/);
    await page.goto(link);
    await page.locator('[data-onset]').waitFor();
    expect(await onset(page)).toBe(words);
    await page.keyboard.press('Delete');
    await untilStored(page);
    await page.goto(link);
    await page
      .locator('[data-link-words]')
      .filter({ hasText: /The mark of this link is not here/ })
      .waitFor();
    await checkAxe(page);
    expect(pass.recordingId).toBeTruthy();
  });

  test('puts an action on another key, tells of clashes, and shows the key in force', async ({
    page,
    openPage,
  }) => {
    await openBench(page, openPage);
    await page.keyboard.press('Shift+Slash');
    await page.getByRole('button', { name: /^crack: F/ }).click();
    await page.keyboard.press('KeyN');
    await page
      .locator('[data-key-words]')
      .filter({ hasText: /N does already: write a note/ })
      .waitFor();
    await page.getByRole('button', { name: /^crack: F/ }).click();
    await page.keyboard.press('KeyX');
    await page.locator('[data-key-words]').filter({ hasText: 'crack: now on X' }).waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'bench-keys');
    await page.keyboard.press('Escape');
    const glyph = page
      .getByRole('toolbar', { name: 'Probable cause' })
      .getByRole('button', { name: /^crack$/ });
    expect(await glyph.getAttribute('aria-keyshortcuts')).toBe('X');
    const before = await countMarks(page);
    await page.keyboard.press('KeyF');
    expect(await countMarks(page)).toBe(before);
    await page.keyboard.press('KeyX');
    expect(await countMarks(page)).toBe(before + 1);
    await page.keyboard.press('Delete');
    await untilStored(page);
  });

  test('stays quick with a thousand marks, each told in the table', async ({ openPage }) => {
    const page = await openPage({ colorScheme: 'dark' });
    const { origin } = inject('demoServer');
    const pass = await openBench(page, openPage);
    const step = Math.floor((pass.frames - 4000) / 1000);
    const made = Array.from({ length: 1000 }, (_, index) => index);
    const failed: number[] = [];
    const setMark = async (index: number) => {
      const startSample = 1000 + index * step;
      const answer = await page.request.post(`/api/recordings/${pass.recordingId}/events`, {
        headers: { Origin: origin, 'Sec-Fetch-Site': 'same-origin' },
        data: {
          passId: pass.id,
          startSample,
          endSample: startSample + 200,
          classKey: 'crack',
          confidence: 'sure',
        },
      });
      if (answer.status() !== 201) failed.push(answer.status());
    };
    for (let from = 0; from < made.length; from += 20)
      await Promise.all(made.slice(from, from + 20).map(setMark));
    expect(failed).toEqual([]);
    await openBench(page, openPage);
    const before = await countMarks(page);
    expect(before).toBeGreaterThanOrEqual(1000);
    expect(await grid(page).locator('[data-key]').count()).toBeLessThan(80);
    await page.keyboard.press('KeyF');
    expect(await countMarks(page)).toBe(before + 1);
    await page.keyboard.press('Backquote');
    await page.keyboard.press('Control+End');
    expect(
      await page.evaluate(() =>
        document.activeElement?.closest('[role="row"]')?.getAttribute('aria-rowindex'),
      ),
    ).toBe(String(before + 2));
    await page.keyboard.press('Control+Home');
    expect(await page.evaluate(() => document.activeElement?.getAttribute('data-cell'))).toBe('1:0');
    await checkAxe(page);
    await takeScreenshot(page, 'bench-thousand-dark');
  });
});
