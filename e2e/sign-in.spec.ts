import { expect, expectAccessible, test } from './fixtures';

test.describe('the sign-in page', () => {
  test('shows nothing that axe or the content policy objects to, in both schemes', async ({ page }) => {
    for (const colorScheme of ['light', 'dark'] as const) {
      await page.emulateMedia({ colorScheme });
      await page.goto('/sign-in');
      await expect(page.getByRole('heading', { name: 'Sign in' })).toBeVisible();
      await expect(page).toHaveTitle(/Sign in/);
      await expectAccessible(page);
    }
  });

  test('says beside the field what is missing and keeps what was typed', async ({ page }) => {
    await page.goto('/sign-in');
    await page.getByLabel('E-mail').fill('maren.quill');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await expect(page.locator('mat-error').first()).toBeVisible();
    await expect(page.getByLabel('E-mail')).toHaveValue('maren.quill');
    await expectAccessible(page);
  });

  test('refuses a wrong password without saying which of the two was wrong', async ({ page, consoleWatch }) => {
    consoleWatch.allow(/status of 401/);
    await page.goto('/sign-in');
    await page.getByLabel('E-mail').fill('nobody@halvik.example');
    await page.getByLabel('Password', { exact: true }).fill('this is not anyone’s password');
    await page.getByRole('button', { name: 'Sign in' }).click();
    await expect(page.getByRole('alert')).not.toBeEmpty();
    await expect(page).toHaveURL(/sign-in/);
  });
});
