import { describe } from 'vitest';
import { checkAxe } from '../support/browser/axe.ts';
import { signIn } from '../support/browser/sign-in.ts';
import { test } from '../support/browser/test.ts';

describe('the own account', () => {
  test('says at its field what is wrong with a new password', async ({ page, guard }) => {
    guard.expectAnswer(422, /\/api\/password$/);
    await signIn(page, 'curator2');
    await page.goto('/tokens');
    await page.getByLabel('Present password').fill('not the present one');
    await page.getByLabel('New password').fill('short');
    await page.getByRole('button', { name: 'Change the password' }).click();
    await page.getByText('New password needs at least 12 characters.').waitFor();
    await page.getByLabel('New password').fill('four amber rivers bend');
    await page.getByRole('button', { name: 'Change the password' }).click();
    await page.getByText('Present password is not your present password.').waitFor();
    await checkAxe(page);
  });

  test('makes a token, shows it once, and revokes it', async ({ page }) => {
    await signIn(page, 'curator2');
    await page.goto('/tokens');
    await page.getByLabel('What it is for').fill('night script');
    await page.getByRole('button', { name: 'Make a token' }).click();
    await page.getByText('night script: copy the token now').waitFor();
    await checkAxe(page);
    await page.reload();
    await page.getByText('night script').waitFor();
    await page
      .getByRole('button', { name: /^Revoke/ })
      .first()
      .click();
    await page.getByRole('dialog').getByRole('button', { name: 'Revoke' }).click();
    await page.getByRole('row').filter({ hasText: 'night script' }).waitFor({ state: 'detached' });
  });
});
