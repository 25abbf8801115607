import { createHash } from 'node:crypto';
import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';
import { dampedSines, mix, pinkNoiseSignal } from '../support/wav/signals.ts';
import { writeWav } from '../support/wav/write-wav.ts';

/* The main job through the pages, each step by the person whose job it is. */

const sampleRateHz = 192_000;
const frames = 2 * sampleRateHz;
const fileName = 'droplet-of-the-walk.wav';
const title = 'Droplet of the walk';

/** Two seconds of pink noise with four bursts of 45 kHz, at a quarter, a half, three quarters and 1.75 s. */
function dropletWav(): Buffer {
  const bursts = [0.25, 0.5, 0.75, 1.75].map((atS) => ({
    onsetSample: atS * sampleRateHz,
    amplitude: 0.3,
    frequencyHz: 45_000,
    decayS: 0.0004,
  }));
  const channel = mix(pinkNoiseSignal(frames, 0.002, 7), dampedSines(frames, bursts, sampleRateHz));
  return Buffer.from(writeWav({ sampleRateHz, channels: [channel], bitsPerSample: 24 }));
}

const wav = dropletWav();
const walk = { recordingPath: '' };

async function describeRun(page: Page): Promise<void> {
  await page.goto('/runs/new');
  await page.getByRole('textbox', { name: 'Title' }).fill(title);
  await page.getByLabel('Lab', { exact: true }).selectOption({ label: 'Northlight Solidification Lab' });
  await page.getByRole('textbox', { name: 'Material' }).fill('water');
  await page.getByRole('combobox', { name: 'Process' }).selectOption({ label: 'droplet freezing' });
  await page.getByRole('button', { name: 'Add a person' }).click();
  await page.getByRole('textbox', { name: 'Name' }).fill('Tomasz Brandvold');
  await page.getByRole('button', { name: 'Create the run' }).click();
  await page.getByRole('heading', { level: 1, name: title }).waitFor();
}

describe.sequential('from a WAV file to a released data set', () => {
  test('a contributor describes the run and brings the recording in', async ({ page }) => {
    await signIn(page, 'contributor');
    await describeRun(page);
    await checkAxe(page);
    await page
      .getByRole('link', { name: /^Bring in a recording/ })
      .first()
      .click();
    await page.getByLabel('Set-up', { exact: true }).selectOption({ index: 1 });
    await page.getByLabel('Licence', { exact: true }).selectOption('CC-BY-4.0');
    await page
      .locator('input[type=file]')
      .setInputFiles([{ name: fileName, mimeType: 'audio/wav', buffer: wav }]);
    await page.getByRole('button', { name: /^Bring in 1/ }).click();
    const item = page.getByRole('listitem').filter({ hasText: fileName });
    await item.getByText('measured', { exact: true }).waitFor({ timeout: 90_000 });
    await item.getByRole('link', { name: 'Open the recording' }).click();
    await page
      .getByRole('heading', { level: 1, name: /^4 candidates, all above the hearing line/ })
      .waitFor();
    walk.recordingPath = new URL(page.url()).pathname;
    const original = await page.request.get(`/api${walk.recordingPath}/audio`);
    expect((await original.body()).equals(wav)).toBe(true);
    await takeScreenshot(page, 'walk-recording');
  });

  test('a curator assigns a pass', async ({ page }) => {
    await signIn(page, 'curator');
    await page.goto(walk.recordingPath);
    await page.getByRole('button', { name: 'Assign a pass' }).click();
    const dialog = page.getByRole('dialog');
    await dialog.getByLabel('Labeler').selectOption({ label: 'Ilse Marwick' });
    await checkAxe(page);
    await dialog.getByRole('button', { name: 'Assign' }).click();
    await page.getByRole('listitem').filter({ hasText: 'Ilse Marwick' }).waitFor();
  });

  test('a labeler marks a burst with one key and finishes the pass', async ({ page }) => {
    await signIn(page, 'labeler');
    await page.goto('/');
    await page.getByRole('link', { name: fileName }).click();
    await page.locator('canvas.picture').waitFor();
    await page.keyboard.press('KeyF');
    await page
      .locator('[data-saving]')
      .filter({ hasText: /stored/ })
      .waitFor();
    await page.getByRole('button', { name: 'Finish pass' }).click();
    const sheet = page.getByRole('dialog');
    await sheet.getByRole('textbox').fill('Only the first burst was asked for.');
    await sheet.getByRole('button', { name: /^Finish/ }).click();
    await page
      .getByText(/finished/)
      .first()
      .waitFor();
    await takeScreenshot(page, 'walk-bench');
  });

  test('a curator collects, releases and publishes it', async ({ page }) => {
    await signIn(page, 'curator');
    await page.goto('/collections/new');
    await page.getByLabel('Title').fill('Droplets of the walk');
    await page.getByLabel('Description').fill('One droplet, from the file to the archive.');
    await page.getByLabel('Publisher').fill('Northlight Solidification Lab');
    await page.getByLabel('Contact e-mail').fill('data@northlight.example');
    await page.getByRole('textbox', { name: 'Name', exact: true }).fill('Anselm Varga');
    await page.getByRole('button', { name: 'Create the collection' }).click();
    await page.getByRole('button', { name: 'Add recordings' }).click();
    await page.getByRole('search', { name: 'Shared recordings' }).getByLabel('Search').fill(fileName);
    await page.getByText('1 shared recording matches; 1 would be added').waitFor();
    await page.getByRole('button', { name: /^Add all/ }).click();
    await page.getByRole('button', { name: `Take out ${fileName}` }).waitFor();
    await page.getByRole('button', { name: 'Done' }).click();
    await page.getByLabel('Notes').fill('The first release of the walk.');
    await page.getByRole('button', { name: 'Freeze and build' }).click();
    await page.getByText('Version 1.0.0 is built and verified').waitFor({ timeout: 60_000 });
    await page.getByRole('button', { name: 'Publish' }).click();
    await page.getByRole('dialog').getByRole('button', { name: 'Publish it' }).click();
    await page.getByRole('link', { name: '1.0.0', exact: true }).waitFor();
  });

  test('anybody finds it, and the archive holds the very bytes of the upload', async ({ page }) => {
    await page.goto('/releases');
    await page.getByRole('link', { name: 'Droplets of the walk' }).first().click();
    await page.getByRole('heading', { name: 'How to cite this version' }).waitFor();
    const href = await page.getByRole('link', { name: /^Download/ }).getAttribute('href');
    const archive = await (await page.request.get(href ?? '')).body();
    const shown = await page.getByRole('group', { name: 'sha256 of the archive' }).innerText();
    expect(createHash('sha256').update(archive).digest('hex')).toBe(shown.trim());
    // Entries are stored, not compressed, so the upload lies in the archive as one piece.
    expect(archive.includes(wav)).toBe(true);
  });
});
