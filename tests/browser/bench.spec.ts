import type { Locator, Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { requirePass, untilSaid } from '../support/browser/bench-page.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

async function openBench(page: Page, address: string): Promise<void> {
  await page.goto(address);
  await page.locator('canvas.picture').waitFor();
}

function saving(page: Page): Locator {
  return page.locator('[data-saving]');
}

function rows(page: Page): Locator {
  return page.getByRole('grid', { name: 'Marks' }).locator('[data-key]');
}

async function countMarks(page: Page): Promise<number> {
  const text = (await page.locator('#marks-title').textContent()) ?? '';
  return Number(/(\d[\d\u202F]*)\u00A0?\s*marks?\b/.exec(text)?.[1]?.replace('\u202F', '') ?? 0);
}

describe('the bench', () => {
  test('lets a labeler mark a blind pass with the keyboard alone, and keeps the marks', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: true });
    const asked: string[] = [];
    page.on('request', (request) => asked.push(request.url()));
    await openBench(page, `/bench/${pass.recordingId}?pass=${pass.id}`);
    const before = await countMarks(page);
    for (const key of ['ArrowUp', 'ArrowUp', 'ArrowUp', 'ArrowUp', 'ArrowRight'])
      await page.keyboard.press(key);
    await page.keyboard.press('KeyF');
    await untilSaid(page, /stored/);
    await page.keyboard.press('PageDown');
    for (let presses = 0; presses < 60; presses++) await page.keyboard.press('ArrowRight');
    await page.keyboard.press('Shift+KeyD');
    await untilSaid(page, /stored/);
    await page.keyboard.press('Shift+Period');
    await page.keyboard.press('Shift+KeyD');
    await untilSaid(page, /stored/);
    expect(await countMarks(page)).toBe(before + 2);
    expect(
      await rows(page)
        .filter({ hasText: /crackle\s*unsure/ })
        .count(),
    ).toBe(1);
    await page.reload();
    await page.locator('canvas.picture').waitFor();
    expect(await countMarks(page)).toBe(before + 2);
    expect(asked.filter((url) => /\/api\/.*\/candidates/.test(url))).toEqual([]);
    expect(await page.getByRole('heading', { name: /Candidates/ }).count()).toBe(0);
    await checkAxe(page);
    await takeScreenshot(page, 'bench-blind');
  });

  test('takes changes back and does them again', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${pass.recordingId}?from=100000&to=200000`);
    const before = await countMarks(page);
    await page.keyboard.press('KeyS');
    await untilSaid(page, /stored/);
    await page.keyboard.press('Delete');
    await untilSaid(page, /stored/);
    expect(await countMarks(page)).toBe(before);
    await page.keyboard.press('Control+KeyZ');
    await untilSaid(page, /stored/);
    expect(await countMarks(page)).toBe(before + 1);
    await page.keyboard.press('Control+KeyZ');
    await page.keyboard.press('Control+KeyZ');
    await untilSaid(page, /stored/);
    expect(await countMarks(page)).toBe(before);
    await page.keyboard.press('Control+Shift+KeyZ');
    await untilSaid(page, /stored/);
    await page.reload();
    await page.locator('canvas.picture').waitFor();
    expect(await countMarks(page)).toBe(before + 1);
  });

  test('marks a drawn span with its band, and a candidate', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${pass.recordingId}?from=1500000&to=1800000`);
    const stage = await page.locator('canvas.overlay').boundingBox();
    if (!stage) throw new Error('The stage is not there.');
    await page.mouse.move(stage.x + 300, stage.y + 80);
    await page.mouse.down();
    await page.mouse.move(stage.x + 360, stage.y + 160, { steps: 5 });
    await page.mouse.up();
    await page.keyboard.press('KeyG');
    await untilSaid(page, /stored/);
    expect(await page.getByLabel('From, kHz').inputValue()).not.toBe('');
    expect(await page.getByLabel('Class').inputValue()).toBe('bubble');
    const candidates = page.getByRole('group', { name: 'Candidates in the part that is shown' });
    await candidates.locator('tbody tr button').last().click();
    await page.mouse.move(5, 5);
    await page
      .getByRole('toolbar', { name: 'Probable cause' })
      .getByRole('button', { name: /crack\b/ })
      .click();
    await untilSaid(page, /stored/);
    await page.getByRole('heading', { name: /candidates, [1-9]\d* confirmed/ }).waitFor();
  });

  test('shows a recording without a lane of classes to those who only look', async ({ page }) => {
    await signIn(page, 'contributor');
    const list = await page.request.get('/api/recordings?limit=50');
    const { items } = (await list.json()) as { items: { id: string; fileName: string }[] };
    const recording = items.find(({ fileName }) => fileName.startsWith('coldstage_run-17'));
    await openBench(page, `/bench/${recording?.id ?? ''}`);
    expect(await page.getByRole('toolbar', { name: 'Probable cause' }).count()).toBe(0);
    await page.getByText('none of yours, to look at only').waitFor();
    await page.keyboard.press('KeyF');
    expect(await saving(page).count()).toBe(0);
    await checkAxe(page);
    await takeScreenshot(page, 'bench-looking');
  });

  test('keeps strip, picture, waveform and everything to work with in sight in a window of 1280 by 800', async ({
    page,
  }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${pass.recordingId}?pass=${pass.id}`);
    await page.keyboard.press('KeyM');
    await page.getByRole('region', { name: 'What is shown' }).waitFor();
    await page.mouse.move(5, 5);
    const parts = ['.freeze', '.lane', 'canvas.picture', '.look', '.sound', '[data-saving]', '.pass'];
    for (const part of parts) {
      const box = await page.locator(part).first().boundingBox();
      expect(box, part).not.toBeNull();
      expect((box?.y ?? 0) + (box?.height ?? 0), part).toBeLessThanOrEqual(800);
    }
    const picture = await page.locator('canvas.picture').boundingBox();
    // The glyphs over it and the gap under it belong to the same canvas.
    expect((picture?.height ?? 0) - 34).toBeGreaterThanOrEqual(0.385 * 800);
    const scrollsPx = await page.evaluate(() => document.documentElement.scrollHeight - innerHeight);
    expect(scrollsPx).toBeLessThanOrEqual(0);
    await takeScreenshot(page, 'bench-laptop');
  });

  test('is usable in the dark theme, at the width of a tablet, and with its sheet of keys', async ({
    openPage,
  }) => {
    const page = await openPage({ viewport: { width: 768, height: 1024 }, colorScheme: 'dark' });
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${pass.recordingId}`);
    await page.keyboard.press('KeyL');
    await checkAxe(page);
    const overflowPx = await page.evaluate(() => document.documentElement.scrollWidth - innerWidth);
    expect(overflowPx).toBeLessThanOrEqual(0);
    await takeScreenshot(page, 'bench-tablet-dark');
    await page.keyboard.press('Shift+Slash');
    await page.getByRole('heading', { name: 'Keys of the bench' }).waitFor();
    await checkAxe(page);
    await page.keyboard.press('Escape');
  });

  test('plays a part slower and says what is heard', async ({ page }) => {
    await signIn(page, 'labeler');
    const pass = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${pass.recordingId}?from=1500000&to=1560000`);
    await page.getByRole('button', { name: /^Slowed 10 times/ }).click();
    await page.getByRole('button', { name: 'Slower' }).click();
    expect(await page.locator('[data-heard]').textContent()).toMatch(/^20 times slower: .+ is heard as .+/);
    await page.keyboard.press('Space');
    await page.getByRole('button', { name: 'Stop' }).waitFor();
    await page.getByRole('button', { name: 'Play from the cursor' }).waitFor({ timeout: 15_000 });
    expect(await page.locator('.sound [role="alert"]').count()).toBe(0);
  });
});
