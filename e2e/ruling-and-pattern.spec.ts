import { markingRoutes } from '@shared/marking';
import { findDemonstration, people } from './demonstration';
import { expect, expectAccessible, test, type Page } from './fixtures';
import { signIn } from './sign-in';

/** How many answers are marked, as the bench says. */
async function marked(page: Page): Promise<number> {
  const words = await page
    .getByRole('status')
    .filter({ hasText: /of \d+ marked/ })
    .innerText();
  return Number(/^\d+/.exec(words)?.[0]);
}

test('a ruling is asked for and decided, a mark applied to a pattern and taken back, all by keyboard', async ({
  page: lead,
  browser,
}) => {
  test.setTimeout(120_000);
  const { courseId, setIds } = await findDemonstration(lead);
  const listed: unknown = await (await lead.request.get(`/api/courses/${courseId}/piles`)).json();
  const { piles } = markingRoutes.piles.response.parse(listed).items.find(({ setId }) => setId === setIds[2]) ?? {
    piles: [],
  };
  // A part without worked pages: its patterns can be marked at once.
  const pile = piles.find(({ position, partLabel }) => position === 1 && partLabel === 'c');
  const address = `/courses/${courseId}/marking/${pile?.id ?? ''}`;
  const context = await browser.newContext();
  const marker = await context.newPage();
  await signIn(marker, people.secondMarker);
  // Whoever comes first begins with the largest pattern; the next begins where nobody is.
  for (const bench of [marker, lead]) {
    await bench.goto(address);
    await expect(bench.getByText('in hand, held by you')).toBeVisible();
  }

  await test.step('the marker asks by r, and the lead sees it at once', async () => {
    await marker.keyboard.press('r');
    await marker.getByLabel('Question').fill('Does A1 stand where the script states $[x, p] = 2i$?');
    await expectAccessible(marker);
    await marker.keyboard.press('Control+Enter');
    await expect(lead.getByRole('button', { name: 'Decide', exact: true })).toBeVisible();
  });

  await test.step('the lead decides, and every bench reads it as new', async () => {
    await lead.getByRole('button', { name: 'Decide', exact: true }).press('Enter');
    await lead.getByLabel('Ruling', { exact: true }).fill('A1 only where the script states its convention.');
    await expectAccessible(lead);
    await lead.keyboard.press('Control+Enter');
    const rulings = marker.getByRole('complementary', { name: /^Rulings/ });
    await expect(rulings.getByText('A1 only where the script states its convention.').first()).toBeVisible();
    await expect(rulings.getByText(/^new, /)).toBeVisible();
    await expect(marker.getByRole('button', { name: 'Decide', exact: true })).toHaveCount(0);
    await expectAccessible(marker);
  });

  await test.step('p shows what would be marked; it is marked, live for the lead, and taken back by Z', async () => {
    const before = await marked(lead);
    await expect(marker.getByRole('button', { name: /^Apply to the pattern/ })).toBeVisible();
    await marker.keyboard.press('p');
    const dialog = marker.getByRole('dialog', { name: /^Apply to/ });
    const confirm = dialog.getByRole('button', { name: /^Mark \d+, and save/ });
    await expect(confirm).toBeVisible();
    await expectAccessible(marker);
    const count = Number(/\d+/.exec(await confirm.innerText())?.[0]);
    expect(count).toBeGreaterThan(1);
    await confirm.press('Enter');
    await expect(dialog).toBeHidden();
    await expect.poll(() => marked(lead)).toBe(before + count + 1);
    await expect(marker.getByText(/marked alike\.$/)).toBeVisible();
    await expectAccessible(marker);
    await marker.keyboard.press('Shift+Z');
    await expect.poll(() => marked(lead)).toBe(before + 1);
    await marker.keyboard.press('z');
    await expect.poll(() => marked(lead)).toBe(before);
    await expect.poll(() => marked(marker)).toBe(before);
  });
  await context.close();
});
