import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

async function untilDrawn(page: Page): Promise<void> {
  await page.locator('canvas.picture[data-drawn="whole"]').waitFor();
}

async function openRecording(page: Page, name: string, query = ''): Promise<void> {
  const answer = await page.request.get('/api/recordings?limit=50');
  const { items } = (await answer.json()) as { items: { id: string; fileName: string }[] };
  const recording = items.find(({ fileName }) => fileName.startsWith(name));
  await page.goto(`/bench/${recording?.id ?? ''}${query}`);
  await untilDrawn(page);
}

function readout(page: Page) {
  return page.locator('.readout');
}

/** What the colours of the picture are, as a number: equal for equal pictures. */
async function pictureHash(page: Page): Promise<number> {
  return page.evaluate(() => {
    const canvas = document.querySelector<HTMLCanvasElement>('canvas.picture');
    const data = canvas?.getContext('2d')?.getImageData(0, 0, canvas.width, canvas.height).data ?? [];
    let hash = 0;
    for (const value of data) hash = (Math.imul(hash, 31) + value) | 0;
    return hash;
  });
}

describe('the picture of the bench', () => {
  test('goes from the whole file to single samples and back without an empty moment', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17');
    const asked: string[] = [];
    page.on('request', (request) => asked.push(request.url()));
    for (let presses = 0; presses < 20; presses++) {
      await page.keyboard.press('ArrowUp');
      expect(await page.locator('canvas.picture').getAttribute('data-drawn')).not.toBe('empty');
    }
    await untilDrawn(page);
    expect(asked.some((url) => /spectrogram\/ultrasonic\/-3\//.test(url))).toBe(true);
    await page.getByText('Frames of 167 \u00B5s above 20\u00A0kHz').waitFor();
    await takeScreenshot(page, 'bench-samples');
    await page.keyboard.press('Digit0');
    expect(await page.locator('canvas.picture').getAttribute('data-drawn')).not.toBe('empty');
    await untilDrawn(page);
  });

  test('tells time, sample, frequency and level under the pointer and under the cursor of the keyboard', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17', '?from=1920000&to=2304000');
    const stage = await page.locator('canvas.overlay').boundingBox();
    if (!stage) throw new Error('The stage is not there.');
    await page.mouse.move(stage.x + 400, stage.y + 120);
    const words =
      /^\d+\.[\d\u202F]+\u00A0s, sample [\d\u202F]+, [\d.]+\u00A0kHz, \u2212[\d.]+\u00A0dB, [\d.]+\u00A0dB (over|under) its quiet$/;
    await readout(page).filter({ hasText: words }).waitFor();
    await page.mouse.move(5, 5);
    await page.keyboard.press('Shift+ArrowUp');
    await readout(page).filter({ hasText: words }).waitFor();
    const before = await readout(page).textContent();
    await page.keyboard.press('Shift+ArrowUp');
    expect(await readout(page).textContent()).not.toBe(before);
  });

  test('shows levels over the quiet at once, without asking the server', async ({ page }) => {
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17');
    await page.waitForLoadState('networkidle');
    const plain = await pictureHash(page);
    const asked: string[] = [];
    page.on('request', (request) => asked.push(request.url()));
    await page.keyboard.press('Shift+KeyH');
    await page.getByText('over the quiet of each frequency').waitFor();
    await expect.poll(() => pictureHash(page), { timeout: 10_000 }).not.toBe(plain);
    await takeScreenshot(page, 'bench-over-quiet');
    await page.getByRole('checkbox', { name: 'Over the quiet' }).uncheck();
    await expect.poll(() => pictureHash(page), { timeout: 10_000 }).toBe(plain);
    expect(asked.filter((url) => url.includes('/spectrogram/'))).toEqual([]);
  });

  test('measures a region beside the quiet, and copies it as a table', async ({ openPage }) => {
    for (const colorScheme of ['light', 'dark'] as const) {
      const page = await openPage({ viewport: { width: 1440, height: 900 }, colorScheme });
      await signIn(page, 'contributor');
      await openRecording(page, 'coldstage_run-17', '?from=1920000&to=2304000');
      await page.keyboard.press('KeyM');
      const panel = page.getByRole('region', { name: 'What is shown' });
      await panel.getByRole('row', { name: /Above 20 kHz/ }).waitFor();
      await panel.getByText(/Hann frames of 4\u202F096 samples that overlap by half \(Welch\)/).waitFor();
      await panel.getByRole('button', { name: 'Copy as CSV' }).click();
      await panel.getByRole('button', { name: 'Copied' }).waitFor();
      await checkAxe(page);
      await takeScreenshot(page, `bench-region-${colorScheme}`);
      await panel.getByRole('button', { name: 'Close' }).click();
      expect(await panel.count()).toBe(0);
    }
  });

  test('says that pieces are missing while the server is away, and draws them when it is back', async ({
    page,
    guard,
  }) => {
    guard.expectConsoleError(/ERR_INTERNET_DISCONNECTED/);
    await signIn(page, 'contributor');
    await openRecording(page, 'coldstage_run-17');
    await page.context().setOffline(true);
    for (let presses = 0; presses < 6; presses++) await page.keyboard.press('ArrowUp');
    await page.getByText(/pieces? of the picture (is|are) missing/).waitFor();
    await page.context().setOffline(false);
    await untilDrawn(page);
    await expect.poll(() => page.getByText(/pieces? of the picture/).count(), { timeout: 40_000 }).toBe(0);
  });
});
