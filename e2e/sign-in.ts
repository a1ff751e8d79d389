import { demonstrationPassword } from '../demo/accounts';
import type { Page } from './fixtures';

/**
 * Signs in on the sign-in page and waits until another page has come.
 *
 * @param page where
 * @param email whose account
 * @param password the demonstration's where nothing is said
 */
export async function signIn(page: Page, email: string, password = demonstrationPassword): Promise<void> {
  await page.goto('/sign-in');
  await page.getByLabel('E-mail').fill(email);
  await page.getByLabel('Password', { exact: true }).fill(password);
  await page.getByRole('button', { name: 'Sign in' }).click();
  await page.waitForURL((url) => url.pathname !== '/sign-in');
}
