import { findDemonstration, people } from './demonstration';
import { expect, expectAccessible, test } from './fixtures';
import { signIn } from './sign-in';

test('a lead gives one student more time; the student sees it, another does not, and it is withdrawn', async ({
  page,
  browser,
  consoleWatch,
}) => {
  test.setTimeout(120_000);
  // A time that is too early is refused by the server, on purpose.
  consoleWatch.allow(/status of 400/);
  const { courseId, setIds } = await findDemonstration(page);
  const setId = setIds[3] ?? '';
  const sheet = `/courses/${courseId}/sheets/${setId}`;

  const context = await browser.newContext();
  const student = await context.newPage();
  await signIn(student, people.student);
  await student.goto(sheet);
  await expect(student.getByRole('region', { name: 'State of the sheet' })).toContainText('closes');
  await expect(student.getByText('You have an allowance.')).toHaveCount(0);
  await student.goto('/account');
  const name = await student.getByRole('heading', { level: 1 }).innerText();

  await page.goto(`/courses/${courseId}/sets/${setId}`);
  const allowances = page.getByRole('region', { name: 'Allowances' });
  await expect(allowances.getByText('Nobody has one')).toBeVisible();
  await allowances.getByRole('button', { name: 'Give an allowance' }).click();
  const form = page.getByRole('form', { name: 'Give an allowance' });

  await test.step('what is missing is said beside its field', async () => {
    await form.getByRole('button', { name: 'Give it' }).click();
    await expect(form.getByText('Choose a student from the list.')).toBeVisible();
    await expect(form.getByText('Give a reason; leads and the record keep it.')).toBeVisible();
  });

  await form.getByLabel('Student').pressSequentially(name.slice(0, 5));
  await page.getByRole('option', { name }).click();
  await form.getByLabel('Reason').fill('A funeral in the family');
  await form.getByRole('button', { name: 'Give it' }).click();
  await expect(form.getByText('Choose a time after the set closes for the others.')).toBeVisible();

  const closes = form.getByLabel('Closes for them');
  const theirs = await closes.inputValue();
  const later = new Date(Date.parse(`${theirs}Z`) + 48 * 3_600_000).toISOString().slice(0, 16);
  await closes.fill(later);
  await expectAccessible(page);
  await form.getByRole('button', { name: 'Give it' }).click();
  await expect(allowances.getByRole('status')).toContainText(`${name} has an allowance now`);
  const row = allowances.getByRole('listitem').filter({ hasText: name });
  await expect(row).toContainText('A funeral in the family');

  await test.step('the student reads their own time, and no reason', async () => {
    await student.goto(sheet);
    await expect(student.getByText('You have an allowance.')).toBeVisible();
    await expect(student.getByText('A funeral in the family')).toHaveCount(0);
    await expectAccessible(student);
  });

  await test.step('a preview shows it to the lead, without an answer', async () => {
    await page.getByRole('link', { name: `Preview the sheet as ${name} gets it` }).click();
    await expect(page.getByText(`As ${name} gets it, closing`)).toBeVisible();
    await expectAccessible(page);
    await page.goBack();
  });

  await test.step('it is withdrawn, and given again by undoing that', async () => {
    await row.getByRole('button', { name: `Withdraw the allowance of ${name}` }).click();
    await expect(row).toHaveCount(0);
    await allowances.getByRole('button', { name: 'Undo' }).click();
    await expect(row).toHaveCount(1);
    await row.getByRole('button', { name: `Withdraw the allowance of ${name}` }).click();
    await expect(allowances.getByText('Nobody has one')).toBeVisible();
    await student.goto(sheet);
    await expect(student.getByRole('region', { name: 'State of the sheet' })).toContainText('closes');
    await expect(student.getByText('You have an allowance.')).toHaveCount(0);
  });
  await context.close();
});

test('a calendar address is made, found by whoever knows it, and revoked', async ({ page, playwright, baseURL }) => {
  await signIn(page, people.secondMarker);
  await page.goto('/account');
  await page.getByRole('button', { name: 'Make an address' }).click();
  const address = await page.getByText(/\/api\/calendars\/.+\.ics$/).innerText();
  await expectAccessible(page);
  const stranger = await playwright.request.newContext();
  const own = new URL(new URL(address).pathname, baseURL).href;
  const found = await stranger.get(own);
  expect(found.headers()['content-type']).toContain('text/calendar');
  expect(await found.text()).toContain('SUMMARY:Set 3 closes');
  await page.getByRole('button', { name: 'Revoke the address' }).click();
  await expect(page.getByText('The address is revoked.')).toBeVisible();
  expect((await stranger.get(own)).status()).toBe(404);
  await stranger.dispose();
});
