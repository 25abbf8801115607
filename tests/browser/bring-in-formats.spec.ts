import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { bytesSource } from '../../shared/audio/byte-source.ts';
import { readWavHeader } from '../../shared/audio/wav-header.ts';
import { encodeFrames } from '../../server/setup/demo-audio/encode-frames.ts';
import { checkAxe } from '../support/browser/axe.ts';
import { choose, openForm } from '../support/browser/bring-in-form.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';
import { filmBytes } from '../support/film-fixtures.ts';
import { fixtureBytes } from '../support/wav/format-fixtures.ts';
import { whiteNoiseSignal } from '../support/wav/signals.ts';

const fileItem = (page: Page, name: string) => page.getByRole('listitem').filter({ hasText: name });

async function bringInAndOpen(page: Page, name: string): Promise<void> {
  await page.getByRole('button', { name: /^Bring in 1/ }).click();
  const item = fileItem(page, name);
  await item.getByText('measured', { exact: true }).waitFor({ timeout: 60_000 });
  await item.getByRole('link', { name: 'Open the recording' }).click();
  await page.getByRole('heading', { name: 'What this file is' }).waitFor();
  await page.waitForLoadState('networkidle');
}

describe('bringing in what is no WAV file', () => {
  test('FLAC: its header is told before a byte is sent, and it is measured', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const buffer = Buffer.from(fixtureBytes('ff-blocks.flac'));
    await choose(page, { name: 'blocks.flac', mimeType: 'audio/flac', buffer });
    await fileItem(page, 'blocks.flac').getByText('FLAC, 16-bit integer, 1 channel').waitFor();
    await bringInAndOpen(page, 'blocks.flac');
    expect(await page.getByText('FLAC, 16-bit integer').count()).toBeGreaterThan(0);
    await takeScreenshot(page, 'recording-of-flac');
    await checkAxe(page);
  });

  test('raw samples: the layout is asked for in words, held against the size, and measured', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const samples = [0, 1].map((n) => whiteNoiseSignal(50_000, 0.1, n));
    const data = encodeFrames(samples, { encoding: 'integer', bitsPerSample: 16, channels: 2 });
    const buffer = Buffer.from(data).swap16();
    await choose(page, { name: 'burst.dat', mimeType: 'application/octet-stream', buffer });
    const item = fileItem(page, 'burst.dat');
    await item.getByText('needs its layout').waitFor();
    await item.getByLabel('Byte order').selectOption('big');
    await item.getByLabel('Channels', { exact: true }).fill('3');
    await item.getByLabel('Sample rate').fill('500000');
    await checkAxe(page);
    await takeScreenshot(page, 'bring-in-layout');
    await item.getByRole('button', { name: 'Use this layout' }).click();
    await item.getByText('They are no whole number of frames of 6 bytes').waitFor();
    expect(await page.getByRole('button', { name: /^Bring in \d/ }).count()).toBe(0);
    await item.getByLabel('Channels', { exact: true }).fill('2');
    await item.getByRole('button', { name: 'Use this layout' }).click();
    await item.getByText('Raw samples, 16-bit integer, 2 channels').waitFor();
    await bringInAndOpen(page, 'burst.dat');
    await takeScreenshot(page, 'recording-of-raw-samples');
    await checkAxe(page);
  });

  test('a table of numbers: it shows how it begins', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const rows = Array.from({ length: 2000 }, (_, n) => `${n * 2},${Math.sin(n).toFixed(4)}`);
    const buffer = Buffer.from(['t/us,U/mV', ...rows].join('\n'));
    await choose(page, { name: 'capture.csv', mimeType: 'text/csv', buffer });
    const item = fileItem(page, 'capture.csv');
    await item.getByText('t/us,U/mV').waitFor();
    await item.getByLabel('Unit of the times').selectOption('us');
    await item.getByLabel('Unit of the samples').selectOption('full-scale');
    await checkAxe(page);
    await takeScreenshot(page, 'bring-in-table');
    await item.getByRole('button', { name: 'Use this layout' }).click();
    await item.getByText('CSV, 64-bit float, 1 channel').waitFor();
    await bringInAndOpen(page, 'capture.csv');
  });
});

async function storedAudio(page: Page): Promise<Uint8Array> {
  const id = new URL(page.url()).pathname.split('/').at(-1);
  return (await page.request.get(`/api/recordings/${id}/audio`)).body();
}

async function floatsOf(wav: Uint8Array): Promise<Float32Array> {
  const { dataOffset, dataBytes } = await readWavHeader(bytesSource(wav));
  return new Float32Array(Uint8Array.from(wav.subarray(dataOffset, dataOffset + dataBytes)).buffer);
}

describe('bringing in the film of a camera', () => {
  const filmFile = (name: string) => ({
    name,
    mimeType: name.endsWith('.mov') ? 'video/quicktime' : 'video/mp4',
    buffer: Buffer.from(filmBytes(name)),
  });
  const loadedScripts = (page: Page) =>
    page.evaluate(() => performance.getEntriesByType('resource').map(({ name }) => name));

  test('uncompressed: its sound alone is sent, with its place on the picture', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const isReader = (name: string) => name.includes('take-sound-out');
    expect((await loadedScripts(page)).filter(isReader)).toEqual([]);
    await choose(page, filmFile('s24.mov'));
    const item = fileItem(page, 's24.mov');
    await item.getByText('WAV, 24-bit integer, 2 channels').waitFor();
    await item.getByText('uncompressed PCM, without loss').waitFor();
    await item.getByText(/It begins 0\.100\s000\ss after the first picture/).waitFor();
    expect((await loadedScripts(page)).filter(isReader)).not.toEqual([]);
    await bringInAndOpen(page, 's24.mov');
    await page.getByText(/s24\.mov \(QuickTime, /).waitFor();
    await page.getByText('The film itself is not kept here.').waitFor();
    expect(await page.getByText('Compressed with loss before').count()).toBe(0);
    await checkAxe(page);
  });

  test('AAC: decoded by the browser, and told as compressed with loss', async ({ page }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    await choose(page, filmFile('aac.mp4'));
    const item = fileItem(page, 'aac.mp4');
    await item.getByText('WAV, 32-bit float, 2 channels').waitFor();
    await item.getByText('AAC, compressed with loss').waitFor();
    await item.getByText('It begins with the first picture').waitFor();
    await checkAxe(page);
    await takeScreenshot(page, 'bring-in-film');
    await bringInAndOpen(page, 'aac.mp4');
    await page.getByText('Compressed with loss before').waitFor();
    await page.getByText('AAC leaves out what it takes to be inaudible').waitFor();
    await takeScreenshot(page, 'recording-of-film');
    await checkAxe(page);
    // The samples beside the film are those of ffmpeg (fixtures/camera/make.sh).
    const ours = await floatsOf(await storedAudio(page));
    const reference = await floatsOf(filmBytes('aac.mp4.wav'));
    expect(ours.length).toBe(reference.length);
    expect(Math.max(...ours.map((value, n) => Math.abs(value - reference[n]!)))).toBeLessThan(1e-5);
  });

  test('without sound, cut off, or in a codec that cannot be decoded: refused, and told why', async ({
    page,
  }) => {
    await signIn(page, 'contributor');
    await openForm(page);
    const cut = { ...filmFile('front.mov'), buffer: Buffer.from(filmBytes('front.mov').slice(0, 5000)) };
    await choose(page, filmFile('silent.mp4'), filmFile('alac.mov'), cut);
    await fileItem(page, 'silent.mp4').getByText('This film has no sound track.').waitFor();
    await fileItem(page, 'alac.mov').getByText('coded as alac, which this browser cannot decode').waitFor();
    await fileItem(page, 'front.mov').getByText('ends before the film says it does').waitFor();
    expect(await page.getByText('cannot be brought in', { exact: true }).count()).toBe(3);
    await checkAxe(page);
  });
});
