import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { bringIn, setUpSensor } from '../support/browser/bring-in.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';
import { dampedSines, mix, whiteNoiseSignal } from '../support/wav/signals.ts';
import { writeWav } from '../support/wav/write-wav.ts';

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

const RATE_HZ = 192_000;

/** Two seconds of three channels, each with bursts of a frequency of its own over noise. */
function threeChannels(): Uint8Array {
  const samples = 2 * RATE_HZ;
  const channels = [30_000, 50_000, 75_000].map((frequencyHz, channel) => {
    const onsets = [0.3, 0.9, 1.5].map((second) => (second + channel / 10) * RATE_HZ);
    const bursts = onsets.map((onsetSample) => ({ onsetSample, frequencyHz, amplitude: 0.4, decayS: 0.01 }));
    return mix(dampedSines(samples, bursts, RATE_HZ), whiteNoiseSignal(samples, 0.002, channel + 1));
  });
  return writeWav({ sampleRateHz: RATE_HZ, channels });
}

async function openOwn(page: Page, recordingId: string): Promise<void> {
  await expect
    .poll(
      async () => {
        const answer = await page.request.get(`/api/recordings/${recordingId}`);
        return ((await answer.json()) as { processing: string }).processing;
      },
      { timeout: 60_000, interval: 300 },
    )
    .toBe('measured');
  await page.goto(`/bench/${recordingId}`);
  await untilDrawn(page);
}

/** Rows of the picture that repeat every eight pixels and are not plain: the hatch. */
async function hatchedRows(page: Page): Promise<number[]> {
  return page.evaluate(() => {
    const canvas = document.querySelector<HTMLCanvasElement>('canvas.picture');
    const context = canvas?.getContext('2d');
    if (!canvas || !context) return [];
    return Array.from({ length: canvas.height }, (_, y) => y).filter((y) => {
      const { data } = context.getImageData(80, y, 160, 1);
      const colour = (x: number) => data.slice(4 * x, 4 * x + 3).join();
      const places = Array.from({ length: 152 }, (_, x) => x);
      return (
        places.every((x) => colour(x) === colour(x + 8)) && new Set(places.slice(0, 8).map(colour)).size > 1
      );
    });
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

  test('shows three channels under one another, each with its own picture, and takes the one that is pointed at', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openOwn(page, await bringIn(page, 'three-channels.wav', threeChannels()));
    const one = await pictureHash(page);
    const asked: string[] = [];
    page.on('request', (request) => asked.push(request.url()));
    await page.getByRole('checkbox', { name: 'Stacked' }).check();
    await expect.poll(() => pictureHash(page)).not.toBe(one);
    await untilDrawn(page);
    for (const channel of [1, 2])
      expect(asked.some((url) => url.includes(`/spectrogram/`) && url.endsWith(`channel=${channel}`))).toBe(
        true,
      );
    const stage = await page.locator('canvas.overlay').boundingBox();
    const picture = await page.locator('canvas.picture').boundingBox();
    if (!stage || !picture) throw new Error('The stage is not there.');
    const channel = page.getByRole('combobox', { name: /^Channel/ });
    for (const row of [2, 1, 0]) {
      await page.mouse.click(stage.x + 500, picture.y + (picture.height * (row + 0.4)) / 3);
      await expect.poll(() => channel.inputValue()).toBe(String(row));
    }
    await checkAxe(page);
    await takeScreenshot(page, 'bench-stacked');
    await page.reload();
    await untilDrawn(page);
    expect(await page.getByRole('checkbox', { name: 'Stacked' }).isChecked()).toBe(true);
  });

  test('hatches what a sensor from 60 kHz cannot hear, up to 60 kHz and no further', async ({ page }) => {
    await signIn(page, 'contributor');
    const setupId = await setUpSensor(page, { lowHz: 60_000, highHz: 400_000 });
    const noise = whiteNoiseSignal(2 * RATE_HZ, 0.01, 5);
    const wav = writeWav({ sampleRateHz: RATE_HZ, channels: [noise] });
    await openOwn(page, await bringIn(page, 'from-sixty.wav', wav, setupId));
    await expect.poll(async () => (await hatchedRows(page)).length).toBeGreaterThan(40);
    const top = Math.min(...(await hatchedRows(page)));
    const picture = await page.locator('canvas.picture').boundingBox();
    if (!picture) throw new Error('The picture is not there.');
    const pointedKhz = async (y: number) => {
      await page.mouse.move(picture.x + 300, picture.y + y);
      await readout(page).filter({ hasText: /kHz/ }).waitFor();
      return Number(/([\d.]+)\u00A0kHz/.exec((await readout(page).textContent()) ?? '')?.[1]);
    };
    expect(await pointedKhz(top - 3)).toBeGreaterThan(60);
    expect(await pointedKhz(top + 3)).toBeLessThan(60);
    await takeScreenshot(page, 'bench-hatched');
  });
});
