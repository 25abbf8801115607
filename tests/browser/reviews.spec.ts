import type { Page } from 'playwright-core';
import { describe, expect } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { takeScreenshot } from '../support/browser/screenshot.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

const personalFile = 'tank-09_96k.wav';
const partnerFile = 'AlSi7_plate_04.wav';

async function openReview(page: Page, fileName: string): Promise<void> {
  await page.goto('/reviews');
  await page.getByRole('link', { name: fileName }).click();
  await page.getByRole('heading', { level: 1, name: fileName }).waitFor();
  await page.getByRole('heading', { name: 'Decide', exact: true }).waitFor();
}

describe('the review desk', () => {
  test('lists what is held with the reason in words, in both themes', async ({ openPage }) => {
    for (const colorScheme of ['light', 'dark'] as const) {
      const page = await openPage({ colorScheme });
      await signIn(page, 'reviewer');
      await page.goto('/reviews');
      const row = page.getByRole('row', { name: new RegExp(personalFile) });
      await row.waitFor();
      expect(await row.innerText()).toContain('could name a person or a place');
      await checkAxe(page);
      await takeScreenshot(page, `reviews-${colorScheme}`);
      await openReview(page, personalFile);
      await checkAxe(page);
      await takeScreenshot(page, `review-${colorScheme}`);
    }
  });

  test('says why a file that names a person cannot be cleared', async ({ page }) => {
    await signIn(page, 'reviewer');
    await openReview(page, personalFile);
    await page.getByText('what is stored is never altered').waitFor();
    expect(await page.getByLabel('Clear it').isDisabled()).toBe(true);
    expect(await page.getByLabel('Keep it in the lab').isEnabled()).toBe(true);
  });

  test('takes a decision with a reason, and offers the next one', async ({ page }) => {
    await signIn(page, 'reviewer');
    await openReview(page, partnerFile);
    await page.getByRole('button', { name: 'Decide' }).click();
    await page.getByText('Reason needs a sentence').waitFor();
    await page.getByLabel('Keep it in the lab').check();
    await page.getByLabel('Reason').fill('The partner has not agreed to anything beyond the lab.');
    await page.getByRole('button', { name: 'Decide' }).click();
    const dialog = page.getByRole('dialog');
    await dialog.getByText('never enters a release').waitFor();
    await checkAxe(page);
    await dialog.getByRole('button', { name: 'Keep it in the lab' }).click();
    await page.getByText(`Kept in the lab: ${partnerFile}`).first().waitFor();
    await page.getByRole('link', { name: 'Open the next one' }).waitFor();
    expect(await page.getByRole('row', { name: new RegExp(partnerFile) }).count()).toBe(0);
    // Which one it is depends on what else was brought in and held meanwhile.
    const sentence = await page.getByText(/Next is .+ of /).innerText();
    const nextFile = /Next is (.+?) of /.exec(sentence)![1]!;
    await page.getByRole('link', { name: 'Open the next one' }).click();
    await page.getByRole('heading', { level: 1, name: nextFile }).waitFor();
    expect(nextFile).not.toBe(partnerFile);
  });

  test('is not there for somebody who decides on nothing', async ({ page }) => {
    await signIn(page, 'labeler');
    await page.goto('/reviews');
    await page.getByRole('heading', { level: 1 }).waitFor();
    expect(await page.getByRole('link', { name: 'Review desk' }).count()).toBe(0);
    expect(await page.getByRole('heading', { level: 1 }).innerText()).not.toBe('Review desk');
  });
});
