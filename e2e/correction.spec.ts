import { correctionRoutes } from '@shared/corrections';
import { markingRoutes } from '@shared/marking';
import { findDemonstration, people } from './demonstration';
import { expect, expectAccessible, test, type Page } from './fixtures';
import { signIn } from './sign-in';

/** Fills in why, asks what would change, makes the correction, and waits until it is made. */
async function seeAndMake(page: Page, words: { reason: string; note: string }): Promise<void> {
  await page.getByLabel('Reason, for the record').fill(words.reason);
  await page.getByLabel('What students read about it in their feedback').fill(words.note);
  await page.getByRole('button', { name: 'See what would change' }).click();
  await expect(page.getByRole('heading', { name: /would change/ })).toBeVisible({ timeout: 30_000 });
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Make the correction' }).click();
  await expect(page.getByText('Students are told in their feedback.')).toBeVisible({ timeout: 30_000 });
}

test('a pattern becomes a slip, and whose marks it changes is seen before', async ({ page, consoleWatch }) => {
  test.setTimeout(120_000);
  consoleWatch.allow(/403/);
  const { courseId, pileId } = await findDemonstration(page);
  const at = (path: string) => `/courses/${courseId}/${path}`;

  await page.goto(at(`marking/${pileId}`));
  await expect(page.getByRole('heading', { name: 'Correct this part' })).toBeVisible();
  await page.getByRole('link', { name: 'Key, tolerance or slips' }).click();
  await expect(page.getByRole('heading', { level: 1, name: /^Correct Set 2/ })).toBeVisible();
  await expectAccessible(page);

  // A group that goes wrong in a way which can be written as an expression, and is no slip yet.
  const ask = async (path: string): Promise<unknown> => (await page.request.get(`/api${path}`)).json();
  const pile = markingRoutes.pile.response.parse(await ask(`/piles/${pileId}`));
  const groups = pile.patterns.filter(({ key }) => key.startsWith('relation '));
  let chosen: { readonly key: string; readonly expression: string; readonly answers: number } | undefined;
  for (const { key } of groups) {
    const path = `/piles/${pileId}/correctable-part?pattern=${encodeURIComponent(key)}`;
    const { slip } = correctionRoutes.correctablePart.response.parse(await ask(path));
    if (slip && slip.answers > (chosen?.answers ?? 0)) chosen = { key, ...slip };
  }
  if (!chosen) throw new Error('No pattern of the demonstration’s pile can become a slip.');

  await page.goto(at(`marking/${pileId}/correction?pattern=${encodeURIComponent(chosen.key)}`));
  const slip = page.getByRole('group', { name: /^Slip / }).last();
  await expect(slip.getByLabel('Expression')).toHaveValue(chosen.expression);
  await slip.getByLabel('Fraction').fill('1/2');
  await slip.getByLabel('Feedback that the student reads').fill('Look at the factor once more.');
  await seeAndMake(page, {
    reason: 'Many went wrong in the same way.',
    note: 'A frequent mistake is recognised now, with a word on it.',
  });
  await expect(page.getByRole('region', { name: 'Answers that change' }).getByRole('row')).not.toHaveCount(1);
  const correctionId = new URL(page.url()).pathname.split('/').at(-1) ?? '';

  await page.goto(at('record'));
  await expect(page.getByText(/was corrected in revision 1, set 2/)).toBeVisible();

  await page.context().clearCookies();
  await signIn(page, people.marker);
  expect((await page.request.get(`/api/corrections/${correctionId}`)).status()).toBe(403);
  await page.goto(at(`marking/${pileId}`));
  await expect(page.getByRole('heading', { name: 'On the pile now' })).toBeVisible();
  await expect(page.getByRole('heading', { name: 'Correct this part' })).toHaveCount(0);
});

test('a correction after release is told to the students', async ({ page, consoleWatch }) => {
  test.setTimeout(120_000);
  consoleWatch.allow(/400/);
  const { courseId, setIds } = await findDemonstration(page);
  const at = (path: string) => `/courses/${courseId}/${path}`;
  const listed: unknown = await (await page.request.get(`/api/courses/${courseId}/piles`)).json();
  const released = markingRoutes.piles.response.parse(listed).items.find(({ setId }) => setId === setIds[1]);
  const pileId = released?.piles[0]?.id ?? '';

  await page.goto(at(`marking/${pileId}/correction`));
  await page.getByLabel('relative, for example 1%').fill('none');
  await page.getByRole('button', { name: 'See what would change' }).click();
  await expect(page.getByText('The relative tolerance must be a number.')).toBeVisible();
  await page.getByLabel('relative, for example 1%').fill('4%');
  const note = 'We had asked for more figures than the numbers carry.';
  await seeAndMake(page, { reason: 'The tolerance was too narrow.', note });

  await page.context().clearCookies();
  await signIn(page, people.student);
  await page.goto(at(`feedback/${setIds[1] ?? ''}`));
  await expect(page.getByText('The tolerance of this part was corrected after you handed in.')).toBeVisible();
  await expect(page.getByText(note)).toBeVisible();
});

test('the key audit of a problem shows what it found beside the part', async ({ page }) => {
  const { courseId, problemId } = await findDemonstration(page);
  await page.goto(`/courses/${courseId}/problems/${problemId}?at=b`);
  await expect(page.getByRole('heading', { name: 'Key audit' })).toBeVisible();
  await page.getByRole('button', { name: 'Run again the key audit' }).click();
  await expect(page.getByText(/Keys finite, in size from/)).toBeVisible({ timeout: 30_000 });
  await expectAccessible(page);
});
