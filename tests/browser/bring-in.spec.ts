import { createHash } from 'node:crypto';
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { choose, openForm, type ChosenFile } from '../support/browser/bring-in-form.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { test } from '../support/browser/test.ts';
import { whiteNoiseSignal } from '../support/wav/signals.ts';
import { writeWav } from '../support/wav/write-wav.ts';

const sampleRateHz = 96_000;

/** Quiet noise, told apart from every other file by its name. */
function noiseFile(name: string, seconds: number): ChosenFile {
  const channels = [whiteNoiseSignal(sampleRateHz * seconds, 0.01, name.length + seconds)];
  return { name, mimeType: 'audio/wav', buffer: Buffer.from(writeWav({ sampleRateHz, channels })) };
}

/** A file whose recorder wrote down who used it: EBU Tech 3285, the chunk bext, originator at byte 256. */
function namedFile(name: string): ChosenFile {
  const bext = new Uint8Array(602);
  bext.set(new TextEncoder().encode('Runa Tveit'), 256);
  const channels = [whiteNoiseSignal(sampleRateHz, 0.01, 5)];
  const bytes = writeWav({ sampleRateHz, channels, extraChunks: [{ id: 'bext', body: bext }] });
  return { name, mimeType: 'audio/wav', buffer: Buffer.from(bytes) };
}

/** So slow that a test can look at an upload under way. */
async function slowDown(page: Page, bytesPerSecond: number): Promise<() => Promise<void>> {
  const devtools = await page.context().newCDPSession(page);
  const conditions = { offline: false, latency: 0, downloadThroughput: -1 };
  await devtools.send('Network.emulateNetworkConditions', {
    ...conditions,
    uploadThroughput: bytesPerSecond,
  });
  return () =>
    devtools
      .send('Network.emulateNetworkConditions', { ...conditions, uploadThroughput: -1 })
      .then(() => undefined);
}

describe('bringing in recordings', () => {
  test('shows what the header says, sends, measures, and leads to the recording', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const file = noiseFile('quiet-noise.wav', 2);
    const completion = page.waitForRequest(/\/api\/uploads\/[0-9a-f-]+\/complete$/);
    await choose(page, file);
    const item = page.getByRole('listitem').filter({ hasText: 'quiet-noise.wav' });
    await item.getByText('WAV, 16-bit integer').waitFor();
    await checkAxe(page);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    const sha256 = createHash('sha256').update(file.buffer).digest('hex');
    expect((await completion).postDataJSON()).toEqual({ sha256 });
    await item.getByText('measured', { exact: true }).waitFor({ timeout: 60_000 });
    await checkAxe(page);
    await takeScreenshot(page, 'bring-in-measured');
    await item.getByRole('link', { name: 'Open the recording' }).click();
    await page.getByText('quiet-noise.wav').first().waitFor();
    await page.getByRole('heading', { name: 'What this file is' }).waitFor();
  });

  test('takes a recording of two samples, and its page can be read', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const channels = [Float32Array.of(0.5, -0.5)];
    const buffer = Buffer.from(writeWav({ sampleRateHz, channels }));
    await choose(page, { name: 'two-samples.wav', mimeType: 'audio/wav', buffer });
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    const item = page.getByRole('listitem').filter({ hasText: 'two-samples.wav' });
    await item.getByText('measured', { exact: true }).waitFor({ timeout: 60_000 });
    await item.getByRole('link', { name: 'Open the recording' }).click();
    await page.getByRole('heading', { name: 'What this file is' }).waitFor();
    await page.waitForLoadState('networkidle');
    await checkAxe(page);
  });

  test('refuses what is no WAV file with a sentence, before a byte is sent', async ({ page }) => {
    await signIn(page, 'contributor');
    const sent: string[] = [];
    page.on('request', (request) => {
      if (request.method() !== 'GET') sent.push(request.url());
    });
    await openForm(page);
    await choose(page, {
      name: 'voice memo.mp3',
      mimeType: 'audio/mpeg',
      buffer: Buffer.from('ID3\u0004'.padEnd(900, '\0')),
    });
    await page.getByRole('list', { name: 'Files' }).getByText('This is an MP3 file.').waitFor();
    await checkAxe(page);
    expect(await page.getByRole('button', { name: /^Bring in \d/ }).count()).toBe(0);
    expect(sent).toEqual([]);
  });

  test('tells beforehand of a name in the header, and that a reviewer will look at it', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, namedFile('with-a-name.wav'));
    const item = page.getByRole('listitem').filter({ hasText: 'with-a-name.wav' });
    await item.getByText('This file names a person in its header').waitFor();
    await item.getByText('What was found').click();
    await item.getByText(/Runa Tveit/).waitFor();
    await checkAxe(page);
  });

  test('goes on by itself when a lost connection comes back', async ({ page, guard }) => {
    guard.expectConsoleError(/ERR_INTERNET_DISCONNECTED/);
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, noiseFile('lost-and-found.wav', 20));
    const speedUp = await slowDown(page, 400_000);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    const item = page.getByRole('listitem').filter({ hasText: 'lost-and-found.wav' });
    await item.getByText(/left$/).waitFor();
    await speedUp();
    await page.context().setOffline(true);
    await item.getByText('interrupted', { exact: true }).waitFor();
    await page.context().setOffline(false);
    await item.getByText('measured', { exact: true }).waitFor({ timeout: 90_000 });
  });

  test('says what is missing before anything is sent', async ({ page }) => {
    await signIn(page, 'contributor2');
    await page.goto('/bring-in');
    await choose(page, noiseFile('too-early.wav', 1));
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    await page.getByText('Run is needed.').waitFor();
    await checkAxe(page);
  });

  test('goes on after a reload with the same file', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const file = noiseFile('long-noise.wav', 20);
    await choose(page, file);
    const speedUp = await slowDown(page, 400_000);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    await page.getByText(/left$/).waitFor();
    await page.getByRole('button', { name: 'Pause long-noise.wav' }).click();
    await page.getByText('paused', { exact: true }).waitFor();
    await takeScreenshot(page, 'bring-in-paused');
    await speedUp();
    page.on('dialog', (dialog) => void dialog.accept());
    await page.reload();
    const item = page.getByRole('listitem').filter({ hasText: 'long-noise.wav' });
    await item.getByText('Choose the same file again to go on').waitFor();
    const kept = Number(await item.getByRole('progressbar').getAttribute('aria-valuenow'));
    expect(kept).toBeGreaterThan(0);
    expect(kept).toBeLessThan(100);
    await checkAxe(page);
    await choose(page, file);
    await item.getByText('measured', { exact: true }).waitFor({ timeout: 90_000 });
  });

  test('cancels an upload for good', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, noiseFile('never-mind.wav', 20));
    const speedUp = await slowDown(page, 200_000);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    await page.getByRole('button', { name: 'Cancel never-mind.wav' }).click();
    await page.getByText('cancelled', { exact: true }).waitFor();
    await speedUp();
    await page.reload();
    await page.getByRole('heading', { name: 'The files' }).waitFor();
    const answer = await page.request.get('/api/uploads');
    expect(await answer.text()).not.toContain('never-mind.wav');
  });

  test('warns before it is left while a file is on its way', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, noiseFile('on-its-way.wav', 20));
    const speedUp = await slowDown(page, 200_000);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    await page.getByText('being sent', { exact: true }).waitFor();
    await page.getByRole('link', { name: 'Runs', exact: true }).click();
    await page.getByRole('dialog').getByText('Leave while files are on their way?').waitFor();
    await page.getByRole('button', { name: 'Stay' }).click();
    await page.getByRole('button', { name: 'Cancel on-its-way.wav' }).click();
    await page.getByText('cancelled', { exact: true }).waitFor();
    await speedUp();
  });

  test('has no violation in the dark, and fits a tablet', async ({ openPage }) => {
    const page = await openPage({ colorScheme: 'dark', viewport: { width: 768, height: 1000 } });
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, noiseFile('in-the-dark.wav', 1));
    await page.getByText('ready to be sent').waitFor();
    await checkAxe(page);
    const overflowPx = await page.evaluate(
      () => document.documentElement.scrollWidth - document.documentElement.clientWidth,
    );
    expect(overflowPx).toBe(0);
    await takeScreenshot(page, 'bring-in-dark-768');
  });
});
