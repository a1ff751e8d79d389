import { findDemonstration, people } from './demonstration';
import { expect, expectAccessible, test, type Page } from './fixtures';
import { signIn } from './sign-in';

/**
 * Opens pages in both schemes, wide and on a phone: each has a heading and a title, lies within its window, and neither
 * axe nor the content policy objects to it.
 */
async function walk(page: Page, addresses: readonly string[]): Promise<void> {
  for (const address of addresses)
    for (const [colorScheme, width] of [
      ['light', 1440],
      ['dark', 360],
    ] as const)
      await test.step(`${address}, ${colorScheme}, ${String(width)} px`, async () => {
        await page.setViewportSize({ width, height: 900 });
        await page.emulateMedia({ colorScheme });
        await page.goto(address);
        await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
        await expect(page.locator('[aria-busy="true"]')).toHaveCount(0);
        await expect(page).toHaveTitle(/.+ · Halfsilver$/);
        await expectAccessible(page);
        const wider = await page.evaluate(() => document.documentElement.scrollWidth - window.innerWidth);
        expect(wider, 'pixels beyond the window').toBeLessThanOrEqual(0);
      });
}

test('every page of a lead', async ({ page }) => {
  test.setTimeout(240_000);
  const { courseId, setIds, pileId, problemId } = await findDemonstration(page);
  const at = (path: string) => `/courses/${courseId}/${path}`;
  await walk(page, [
    at('desk'),
    at('problems'),
    at(`problems/${problemId}`),
    at('sets'),
    at('sets/new'),
    at(`sets/${setIds[2] ?? ''}`),
    at(`sets/${setIds[4] ?? ''}/settings`),
    at('marking'),
    at(`marking/${pileId}`),
    at(`marking/${pileId}/correction`),
    at('results'),
    at(`results/${setIds[1] ?? ''}`),
    at(`results/${setIds[2] ?? ''}/release`),
    at('queries'),
    at('receipts'),
    at('people'),
    at('people/import'),
    at('people/course'),
    at('record'),
    '/account',
    '/courses/new',
  ]);
});

test('every page of a marker', async ({ page }) => {
  test.setTimeout(120_000);
  const { courseId, pileId } = await findDemonstration(page);
  await page.context().clearCookies();
  await signIn(page, people.marker);
  const at = (path: string) => `/courses/${courseId}/${path}`;
  await walk(page, [at('desk'), at('problems'), at('marking'), at(`marking/${pileId}`), at('queries'), at('receipts')]);
});

test('every page of a student', async ({ page }) => {
  test.setTimeout(120_000);
  const { courseId, setIds } = await findDemonstration(page);
  await page.context().clearCookies();
  await signIn(page, people.student);
  const at = (path: string) => `/courses/${courseId}/${path}`;
  await walk(page, [
    at('desk'),
    at('sheets'),
    at(`sheets/${setIds[3] ?? ''}`),
    at(`sheets/${setIds[2] ?? ''}/receipt`),
    at('feedback'),
    at(`feedback/${setIds[1] ?? ''}`),
  ]);
});
