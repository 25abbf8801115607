import { readdirSync } from 'node:fs';
import path from 'node:path';
import type { Page } from 'playwright-core';
import { beforeAll, describe, expect, inject } from 'vitest';
import { bytesSource } from '../../shared/audio/byte-source.ts';
import { decodeFrames } from '../../shared/audio/pcm-decode.ts';
import { readWavHeader } from '../../shared/audio/wav-header.ts';
import { checkAxe } from '../support/browser/axe.ts';
import { requirePass } from '../support/browser/bench-page.ts';
import { bringIn } from '../support/browser/bring-in.ts';
import { launchChromium } from '../support/browser/chromium.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';
import { dampedSines, humSignal, mix, whiteNoiseSignal } from '../support/wav/signals.ts';
import { writeWav } from '../support/wav/write-wav.ts';

const rateHz = 1_000_000;
let recordingId = '';

/** A second at 1 MHz: a burst of 150 kHz at 0.304 s and one of 42 kHz at 0.604 s, over hum and noise. */
function oneMegahertz(): Uint8Array {
  const bursts = [
    { onsetSample: 304_000, frequencyHz: 150_000, amplitude: 0.5, decayS: 0.0005 },
    { onsetSample: 604_000, frequencyHz: 42_000, amplitude: 0.4, decayS: 0.004 },
  ];
  const hum = humSignal(rateHz, [{ frequencyHz: 5000, amplitude: 0.05 }], rateHz, 3);
  const channels = [mix(dampedSines(rateHz, bursts, rateHz), hum, whiteNoiseSignal(rateHz, 0.001, 4))];
  return writeWav({ sampleRateHz: rateHz, channels });
}

/** The hook before the tests ends this when it takes too long. */
async function untilMeasured(page: Page, id: string): Promise<void> {
  for (let state = ''; state !== 'measured'; await page.waitForTimeout(200)) {
    const answer = await page.request.get(`/api/recordings/${id}`);
    state = ((await answer.json()) as { processing: string }).processing;
    if (state === 'failed') throw new Error('The recording of 1 MHz could not be measured.');
  }
}

beforeAll(async () => {
  const browser = await launchChromium();
  const context = await browser.newContext({ baseURL: inject('demoServer').origin });
  const page = await context.newPage();
  await signIn(page, 'contributor');
  recordingId = await bringIn(page, 'one-megahertz.wav', oneMegahertz());
  await untilMeasured(page, recordingId);
  await browser.close();
});

async function openBench(page: Page, address: string): Promise<void> {
  await page.goto(address);
  await page.locator('canvas.picture').first().waitFor();
  await page.waitForLoadState('networkidle');
}

/** What the page gets when it plays from the middle of what it shows. */
async function heard(page: Page): Promise<Float32Array> {
  const answer = page.waitForResponse((response) => response.url().includes('/listen?'));
  await page.keyboard.press('Space');
  const bytes = await (await answer).body();
  const header = await readWavHeader(bytesSource(bytes));
  expect(header.format).toMatchObject({ sampleRateHz: 48_000, channels: 1, bitsPerSample: 16 });
  const samples = new Float32Array(header.format.frames);
  decodeFrames(bytes.subarray(header.dataOffset), header.format, [samples]);
  return samples;
}

/** The strongest of the frequencies from 1 kHz to 20 kHz in steps of 100 Hz: above the hum, which slowed lies at 500 Hz. */
function strongestHz(samples: Float32Array): number {
  const power = (hz: number) => {
    let re = 0;
    let im = 0;
    for (const [n, x] of samples.entries()) {
      re += x * Math.cos((2 * Math.PI * hz * n) / 48_000);
      im += x * Math.sin((2 * Math.PI * hz * n) / 48_000);
    }
    return re * re + im * im;
  };
  const frequencies = Array.from({ length: 191 }, (_, i) => 1000 + 100 * i);
  const powers = frequencies.map(power);
  return frequencies[powers.indexOf(Math.max(...powers))]!;
}

function heardWords(page: Page): Promise<string | null> {
  return page.locator('[data-heard]').textContent();
}

describe('listening on the bench', () => {
  // Time expansion by 10 divides frequencies by 10; a heterodyne subtracts its carrier.
  test('a file of 1 MHz slowed ten times: a burst of 150 kHz is heard at 15 kHz', async ({ page }) => {
    await signIn(page, 'contributor');
    await openBench(page, `/bench/${recordingId}?from=280000&to=320000`);
    await page.keyboard.press('Digit7');
    expect(await heardWords(page)).toBe('10 times slower: 150\u00A0kHz is heard as 15\u00A0kHz');
    const samples = await heard(page);
    expect(samples.length).toBe(9600);
    expect(Math.abs(strongestHz(samples) - 15_000)).toBeLessThanOrEqual(100);
    await page.getByRole('button', { name: 'Play from the cursor' }).waitFor();
    expect(await page.locator('.sound [role="alert"]').count()).toBe(0);
  });

  test('shifted by 40 kHz, a burst of 42 kHz is heard at 2 kHz, and the carrier moves by keys', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openBench(page, `/bench/${recordingId}?from=560000&to=640000`);
    await page.keyboard.press('Digit8');
    expect(await heardWords(page)).toBe('Shifted: 42\u00A0kHz is heard as 2\u00A0kHz');
    expect(Math.abs(strongestHz(await heard(page)) - 2000)).toBeLessThanOrEqual(100);
    await page.getByRole('button', { name: 'Play from the cursor' }).waitFor();
    const carrier = page.getByRole('slider', { name: 'Carrier' });
    await carrier.focus();
    await page.keyboard.press('ArrowDown');
    await page.keyboard.press('Shift+Minus');
    expect(await carrier.getAttribute('aria-valuenow')).toBe('38000');
    await expect.poll(() => heardWords(page)).toBe('Shifted: 40\u00A0kHz is heard as 2\u00A0kHz');
    expect(Math.abs(strongestHz(await heard(page)) - 4000)).toBeLessThanOrEqual(100);
  });

  test('hum is gated by the quiet span, and the way of hearing changes while the sound goes on', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openBench(page, `/bench/${recordingId}?from=100000&to=900000`);
    await page.keyboard.press('KeyK');
    await page.keyboard.press('Space');
    await page.getByRole('button', { name: 'Stop' }).waitFor();
    const gated = page.waitForResponse((response) => response.url().includes('gate=machine'));
    await page.keyboard.press('Digit9');
    await gated;
    await page.getByText(/quiet span \d/).waitFor();
    await page.keyboard.press('Digit7');
    await page.getByText('The sound is being made').waitFor({ state: 'hidden' });
    expect(await page.getByRole('button', { name: 'Stop' }).count()).toBe(1);
    await page.keyboard.press('Space');
    await page.getByRole('button', { name: 'Play from the cursor' }).waitFor();
    expect(await page.locator('.sound [role="alert"]').count()).toBe(0);
  });

  test('a drawn span can be the noise; one that is too short is refused in words', async ({
    page,
    guard,
  }) => {
    guard.expectAnswer(422, /\/listen\?/);
    await signIn(page, 'labeler');
    const { recordingId: passOf } = await requirePass(page, { blind: false });
    await openBench(page, `/bench/${passOf}?from=1500000&to=1502000`);
    await page.keyboard.press('Digit9');
    const stage = await page.locator('canvas.overlay').boundingBox();
    if (!stage) throw new Error('The stage is not there.');
    await page.mouse.move(stage.x + 300, stage.y + 80);
    await page.mouse.down();
    await page.mouse.move(stage.x + 340, stage.y + 160, { steps: 5 });
    await page.mouse.up();
    await page.getByRole('button', { name: 'Noise by the drawn span' }).click();
    await page.getByText(/noise of 1\.5/).waitFor();
    await page.getByRole('button', { name: 'Play the drawn span' }).click();
    await page.getByText(/a noise profile needs at least \d+ ms at this speed/).waitFor();
    await page.getByRole('button', { name: 'Noise by the machine' }).click();
    await page.getByText(/quiet span \d/).waitFor();
  });

  test.for(['light', 'dark'] as const)(
    'is clear and clean in the %s theme',
    async (colorScheme, { openPage }) => {
      const page = await openPage({ viewport: { width: 1440, height: 900 }, colorScheme });
      await signIn(page, 'contributor');
      await openBench(page, `/bench/${recordingId}?from=600000&to=640000`);
      await page.keyboard.press('Digit8');
      await page.keyboard.press('Digit9');
      await page.getByText(/quiet span \d/).waitFor();
      await checkAxe(page);
      await takeScreenshot(page, `bench-listening-${colorScheme}`);
    },
  );

  test('nothing passes the limiter of the page, whatever is played', async ({ page }) => {
    const assets = readdirSync(path.resolve(import.meta.dirname, '../../dist/client/assets'));
    const worklet = assets.find((name) => /^limiter-worklet-.*\.js$/.test(name));
    await page.goto('/');
    const peaks = await page.evaluate(async (address) => {
      const render = async (sampleOf: (n: number) => number) => {
        const context = new OfflineAudioContext(2, 48_000, 48_000);
        await context.audioWorklet.addModule(address);
        const limiter = new AudioWorkletNode(context, 'recalesce-limiter', {
          outputChannelCount: [2],
          channelCount: 2,
          channelCountMode: 'explicit',
        });
        const buffer = context.createBuffer(2, 48_000, 48_000);
        for (const channel of [0, 1])
          buffer.getChannelData(channel).set(Float32Array.from({ length: 48_000 }, (_, n) => sampleOf(n)));
        const source = new AudioBufferSourceNode(context, { buffer });
        source.connect(limiter).connect(context.destination);
        source.start();
        const rendered = await context.startRendering();
        return rendered.getChannelData(0).reduce((most, x) => Math.max(most, Math.abs(x)), 0);
      };
      return {
        soft: await render((n) => 0.4 * Math.sin(n / 10)),
        square: await render((n) => (Math.floor(n / 40) % 2 ? 1 : -1)),
        huge: await render((n) => (n % 5000 === 0 ? 1e6 : Math.sin(n))),
        hostile: await render((n) => [Number.NaN, Number.POSITIVE_INFINITY, -3e38, 1, -1][n % 5] ?? 0),
      };
    }, `/assets/${worklet}`);
    expect(peaks.soft).toBeCloseTo(0.4, 3);
    for (const peak of Object.values(peaks)) expect(peak).toBeLessThanOrEqual(10 ** (-6 / 20));
    expect(peaks.square).toBeGreaterThan(0.45);
  });
});
