import { markers } from '../demo/accounts';
import { findDemonstration } from './demonstration';
import { expect, expectAccessible, test } from './fixtures';
import { signIn } from './sign-in';

const title = 'A night at the counter';

test('a marker who is asked comments, tries out and signs off; the author sees it at once', async ({
  browser,
  page,
}) => {
  test.setTimeout(150_000);
  const { courseId } = await findDemonstration(page);
  await page.goto(`/courses/${courseId}/problems`);
  await page
    .getByRole('link', { name: new RegExp(title) })
    .first()
    .click();
  await expect(page.getByText('Nobody has signed off revision 1 yet.')).toBeVisible();
  await expectAccessible(page);

  const context = await browser.newContext();
  const marker = await context.newPage();
  await signIn(marker, markers[0].email);
  await marker
    .getByRole('listitem')
    .filter({ hasText: `“${title}” waits for your review` })
    .getByRole('link', { name: /Open the problem/ })
    .click();

  await test.step('a comment with suggested wording, accepted with one act', async () => {
    await marker.getByRole('button', { name: 'Comment', exact: true }).click();
    await marker.getByLabel('About').selectOption({ label: 'line 3: (a) What is the mean of your counts?' });
    await marker.getByLabel('Comment', { exact: true }).fill('Say of how many shots.');
    await marker.getByRole('button', { name: 'Suggest wording' }).click();
    await marker.getByLabel('Suggested wording').fill('(a) What is the mean of your 400 counts?');
    await expectAccessible(marker);
    await marker.getByRole('button', { name: 'Send the comment' }).click();
    await expect(page.getByText('Say of how many shots.')).toBeVisible();
    await page.getByRole('button', { name: 'Accept' }).click();
    await expect(page.getByRole('textbox', { name: 'Statement' })).toContainText('mean of your 400 counts');
    await expect(marker.getByText('Say of how many shots.')).toBeHidden();
    await expect(marker.getByRole('button', { name: 'Show 1 settled' })).toBeVisible();
  });

  await test.step('a try-out, whose differences to the key the author sees', async () => {
    await marker.getByRole('link', { name: 'Try it out' }).click();
    await marker.getByRole('textbox', { name: 'Answer to (a)' }).fill('77.7');
    await expectAccessible(marker);
    await marker.getByRole('button', { name: 'Hand in the try-out' }).click();
    await expect(marker.getByRole('heading', { name: 'How your answers stand to the keys' })).toBeVisible();
    await page.getByRole('button', { name: `${markers[0].name}, 1 min, 0 of 2 right` }).click();
    await expect(page.getByText('not the key')).toBeVisible();
    await marker.getByRole('link', { name: 'To the problem' }).click();
  });

  await test.step('a sign-off, which a changed tolerance makes void', async () => {
    await marker.getByRole('button', { name: 'Sign off revision 1' }).click();
    await expect(page.getByText(`${markers[0].name} signed off revision 1.`)).toBeVisible();
    await page.goto(`${page.url().split('?')[0] ?? ''}?at=a`);
    await page.getByRole('region', { name: 'Tolerance' }).getByLabel('relative').fill('0.8%');
    await page.getByRole('button', { name: 'Save as revision 2' }).click();
    await page.getByLabel('What is new in revision 2').fill('A wider tolerance');
    await page.getByRole('button', { name: 'Save revision 2' }).click();
    await expect(
      page.getByText(/The tolerance of \(a\) has changed since, so a fresh sign-off is needed/),
    ).toBeVisible();
    await page.getByRole('button', { name: 'What changed since revision 1' }).click();
    await expect(page.getByRole('row', { name: /\(a\) tolerance relative/ })).toBeVisible();
    await expectAccessible(page);
  });
  await context.close();
});
