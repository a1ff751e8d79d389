import { readFileSync } from 'node:fs';
import { findDemonstration, people } from './demonstration';
import { expect, expectAccessible, test, type Page } from './fixtures';
import { signIn } from './sign-in';

/** The set of the demonstration that is released. */
const releasedSet = 1;

/** Signs somebody in on a page of their own, with the window of a phone or of a desk. */
async function signedIn(page: Page, email: string, width = 1440): Promise<void> {
  await page.context().clearCookies();
  await page.setViewportSize({ width, height: 900 });
  await signIn(page, email);
}

test('a student queries a mark on a phone; who did not give it answers, and the student reads why', async ({
  page,
}) => {
  test.setTimeout(180_000);
  const { courseId, setIds } = await findDemonstration(page);
  const at = (path: string) => `/courses/${courseId}/${path}`;
  const feedback = at(`feedback/${setIds[releasedSet] ?? ''}`);
  const reason = `The value is on my page, before it is rounded. ${String(Date.now())}`;
  const words = 'It is there, and it is right.';

  // The demonstration's release is two weeks old; the lead gives more time.
  await page.goto(at('queries'));
  await page.getByLabel('Queries until').fill('2040-01-31T18:00');
  await page.getByRole('button', { name: `Save the closing of queries of set ${String(releasedSet)}` }).click();
  await expect(page.getByText(/can be queried until .*31 Jan/)).toBeVisible();

  await signedIn(page, people.student, 360);
  await page.goto(feedback);
  await expect(page.getByText('Mark queries until')).toBeVisible();
  await expect(page.getByRole('heading', { name: 'If you think a mark is wrong' })).toBeVisible();
  const query = page.getByRole('button', { name: /^Query this mark: / }).first();
  const what = ((await query.getAttribute('aria-label')) ?? '').replace('Query this mark: ', '');
  const criterion = what.split(' ')[0] ?? '';
  // By keyboard: the focus goes to where the reason is written.
  await query.focus();
  await page.keyboard.press('Enter');
  const why = page.getByLabel(new RegExp(`^${criterion} in .*: why\\?$`));
  await expect(why).toBeFocused();
  const label = await page.getByText(/ in .*: why\?$/).innerText();
  const place = label.replace(`${criterion} in `, '').replace(': why?', '');
  await page.getByRole('button', { name: 'Send the query' }).click();
  await expect(page.getByText('Say why you think that the mark is wrong.')).toBeVisible();
  await why.fill(reason);
  await expectAccessible(page);
  await page.getByRole('button', { name: 'Send the query' }).click();
  const own = page.getByRole('group', { name: /^Your query on/ }).filter({ hasText: reason });
  await expect(own.getByText('Your query waits')).toBeVisible();
  await expectAccessible(page);

  // One of the team did not give the mark.
  let answered = false;
  for (const colleague of [people.lead, people.marker, people.secondMarker]) {
    if (answered) break;
    await signedIn(page, colleague);
    await page.goto(at('queries'));
    await expect(page.getByRole('heading', { name: 'Mark queries', level: 1 })).toBeVisible();
    await expectAccessible(page);
    await page
      .getByRole('link', { name: `Set ${String(releasedSet)}, ${place}, ${criterion}` })
      .first()
      .click();
    await expect(page.getByText(reason)).toBeVisible();
    await expectAccessible(page);
    const send = page.getByRole('button', { name: 'Answer that the mark stands' });
    const notYours = page.getByText('You gave a mark of this answer');
    await expect(send.or(notYours)).toBeVisible();
    if (await notYours.isVisible()) {
      await expect(send).toHaveCount(0);
      continue;
    }
    await page.getByRole('button', { name: new RegExp(`^${criterion} .*not awarded$`) }).click();
    await page.getByLabel('Words to the student').fill(words);
    await expectAccessible(page);
    await page.getByRole('button', { name: 'Change the mark and answer' }).click();
    await expect(page.getByRole('heading', { name: /^Answered / })).toBeVisible();
    await expect(page.getByText('The mark went from')).toBeVisible();
    answered = true;
  }
  expect(answered, 'somebody may answer').toBe(true);

  await signedIn(page, people.student);
  await page.goto(feedback);
  await expect(own.getByText('Your query is answered')).toBeVisible();
  await expect(own.getByText('The mark went from')).toBeVisible();
  await expect(own.getByText(words)).toBeVisible();
  await page.goto('/account');
  const looks = page.getByRole('region', { name: 'What is held about you' });
  await expect(looks.getByText(/A (lead|marker)/).first()).toBeVisible();
});

test('a receipt is saved by its student and verified by a marker, who sees a change in it', async ({ page }) => {
  test.setTimeout(120_000);
  const { courseId, setIds } = await findDemonstration(page);
  await signedIn(page, people.student, 360);
  await page.goto(`/courses/${courseId}/sheets/${setIds[releasedSet] ?? ''}/receipt`);
  await expect(page.getByText('signature, Ed25519')).toBeVisible();
  const saving = page.waitForEvent('download');
  await page.getByRole('button', { name: 'Save the signed receipt' }).click();
  const path = await (await saving).path();
  const text = readFileSync(path, 'utf8');

  await signedIn(page, people.marker);
  await page.goto(`/courses/${courseId}/receipts`);
  await page.locator('input[type=file]').setInputFiles(path);
  await expect(page.getByRole('heading', { name: 'Valid: this server gave this receipt' })).toBeVisible();
  await expectAccessible(page);
  await page.getByRole('textbox', { name: 'Receipt' }).fill(text.replace(/"submission": \d+/, '"submission": 9'));
  await page.getByRole('button', { name: 'Verify' }).click();
  await expect(page.getByRole('heading', { name: 'Not valid' })).toBeVisible();
  await expect(page.getByText('The signature does not fit')).toBeVisible();
  await expectAccessible(page);
});

test('a student saves what is held about them', async ({ page }) => {
  await signIn(page, people.student);
  await page.goto('/account');
  const saving = page.waitForEvent('download');
  await page.getByRole('link', { name: 'Save it as a file (JSON)' }).click();
  const data: unknown = JSON.parse(readFileSync(await (await saving).path(), 'utf8'));
  expect(data).toMatchObject({ account: { email: people.student } });
  await expectAccessible(page);
});
