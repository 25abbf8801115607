import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

interface RecordingFacts {
  id: string;
  runId: string;
  fileName: string;
}

async function recordingCalled(page: Page, part: string): Promise<RecordingFacts> {
  const answer = await page.request.get('/api/recordings?limit=100');
  const { items } = (await answer.json()) as { items: RecordingFacts[] };
  const found = items.find(({ fileName }) => fileName.includes(part));
  if (!found) throw new Error(`The demo has no recording called ${part}.`);
  return found;
}

async function openBench(page: Page, part: string): Promise<RecordingFacts> {
  const recording = await recordingCalled(page, part);
  await page.goto(`/bench/${recording.id}`);
  await page.locator('canvas.picture').waitFor();
  return recording;
}

const strip = (page: Page) => page.getByRole('slider', { name: 'Part of the run that is shown' });
const phaseRows = (page: Page) => page.locator('table.phases tbody tr');

describe('the strip of the run', () => {
  test('shows phases, candidates and temperature of the run, and a press goes there', async ({ page }) => {
    await signIn(page, 'contributor');
    await openBench(page, 'run-17');
    const ribbon = page.getByRole('img', { name: /^Growth phases: supercooled liquid/ });
    await ribbon.waitFor();
    const names = page.locator('.freeze .names');
    for (const name of ['candidates', '\u00B0C', 'level']) await names.getByText(name).waitFor();
    for (let presses = 0; presses < 3; presses++) await page.keyboard.press('ArrowUp');
    await strip(page).click({ position: { x: 40, y: 20 } });
    const text = (await strip(page).getAttribute('aria-valuetext')) ?? '';
    expect(text).toContain('of the run, supercooled liquid');
    await page.mouse.move(0, 0);
    await takeScreenshot(page, 'bench-strip');
    await page.emulateMedia({ colorScheme: 'dark' });
    await takeScreenshot(page, 'bench-strip-dark');
  });

  test('lets a contributor mark phases by the keyboard alone, and take them back', async ({ page }) => {
    await signIn(page, 'contributor');
    await openBench(page, 'control');
    await page.waitForLoadState('networkidle');
    await page.locator('details.phases > summary').click();
    const before = await phaseRows(page).count();
    await page.locator('body').click({ position: { x: 5, y: 5 } });
    await page.keyboard.press('BracketLeft');
    for (let presses = 0; presses < 5; presses++) await page.keyboard.press('ArrowRight');
    await page.keyboard.press('BracketRight');
    await expect.poll(() => phaseRows(page).count()).toBe(before + 1);
    for (let presses = 0; presses < 5; presses++) await page.keyboard.press('ArrowRight');
    await page.keyboard.press('BracketRight');
    await expect.poll(() => phaseRows(page).count()).toBe(before + 2);
    await page.keyboard.press('Shift+BracketRight');
    await page.getByRole('group', { name: 'The selected growth phase' }).waitFor();
    await checkAxe(page);
    await page.reload();
    await page.locator('details.phases > summary').click();
    await expect.poll(() => phaseRows(page).count()).toBe(before + 2);
  });

  test('shows a labeler in a blind pass time and level alone', async ({ page }) => {
    await signIn(page, 'labeler');
    const asked: string[] = [];
    page.on('response', (response) => {
      if (/\/api\/runs\/[^/]+\/(phases|timeline|traces|videos)/.test(response.url()))
        asked.push(response.url());
    });
    const { runId } = await openBench(page, 'flask-04');
    await page.locator('.freeze .names').getByText('level').waitFor();
    const names = await page.locator('.freeze .names > span').allTextContents();
    expect(names).toEqual(['level']);
    expect(await page.getByRole('img', { name: /Growth phases/ }).count()).toBe(0);
    expect(await page.locator('details.phases').count()).toBe(0);
    const phases = await (await page.request.get(`/api/runs/${runId}/phases`)).json();
    expect(phases).toMatchObject({ items: [], isWithheld: true });
    expect(asked.length).toBeGreaterThan(0);
    await takeScreenshot(page, 'bench-strip-blind');
  });
});

describe('a film beside the sound', () => {
  test('stands where the cursor stands, and moves under the picture', async ({ page }) => {
    await signIn(page, 'contributor');
    await openBench(page, 'run-17');
    await page.getByRole('button', { name: 'Show the film' }).click();
    const film = page.locator('video');
    const atS = () => film.evaluate((element: HTMLVideoElement) => element.currentTime);
    await expect.poll(atS).toBeGreaterThan(10);
    const middle = await atS();
    // The film began 1.5 s before the recording, whose middle is at 15 s.
    expect(middle).toBeCloseTo(16.5, 0);
    await page.locator('body').click({ position: { x: 5, y: 5 } });
    for (let presses = 0; presses < 5; presses++) await page.keyboard.press('ArrowRight');
    // Five times a fiftieth of thirty seconds.
    await expect.poll(async () => (await atS()) - middle).toBeGreaterThan(2.9);
    await checkAxe(page);
    await takeScreenshot(page, 'bench-film');
    await page.getByRole('button', { name: 'Under' }).click();
    await page.locator('.film.is-under').waitFor();
    await page.getByRole('button', { name: 'Close' }).click();
  });
});

describe('the run page', () => {
  test('has the same strip, the phases and the film, and a press opens the bench there', async ({ page }) => {
    await signIn(page, 'contributor');
    const { runId, id } = await recordingCalled(page, 'run-17');
    await page.goto(`/runs/${runId}`);
    await page.getByRole('heading', { name: 'The run at a glance' }).waitFor();
    await page.getByRole('heading', { name: 'Films' }).waitFor();
    await page.waitForLoadState('networkidle');
    await checkAxe(page);
    await takeScreenshot(page, 'run-beside');
    await page.getByRole('slider', { name: /Place in the run/ }).click({ position: { x: 200, y: 20 } });
    await page.waitForURL((url) => url.pathname === `/bench/${id}` && url.searchParams.has('from'));
  });
});
