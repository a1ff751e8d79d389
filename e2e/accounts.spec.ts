import { MailCatcher } from './mail-catcher';
import { expect, expectAccessible, test } from './own-server';

const first = 'a first phrase to come in';
const second = 'another phrase to come in';

test('an account is made, signs out, forgets its password and comes back by a letter', async ({
  browser,
  ownServer,
  consoleWatch,
}) => {
  test.setTimeout(120_000);
  const post = new MailCatcher();
  await ownServer.stop();
  await ownServer.start({ SMTP_URL: await post.start() });
  // Browsers put refusals on the console as well.
  consoleWatch.allow(/status of 4(01|09|22|10|00)/);
  const page = await (await browser.newContext()).newPage();
  const at = (path: string) => `${ownServer.origin}${path}`;
  const linkTo = async (email: string) => {
    await expect.poll(() => post.latestTo(email)?.text ?? '').toContain('/welcome#');
    return /https?:\S+\/welcome#\S+/.exec(post.latestTo(email)?.text ?? '')?.[0] ?? '';
  };

  await test.step('a password that is short, or known to everybody, is refused beside the field', async () => {
    await page.goto(ownServer.firstAdministratorLink);
    await page.getByLabel('Name').fill('Ada Quist');
    await page.getByLabel('E-mail').fill('a.quist@northmere.example');
    await page.getByLabel('New password').fill('short');
    await page.getByRole('button', { name: 'Set the password' }).click();
    await expect(page.locator('mat-error')).toContainText('15 characters');
    await page.getByLabel('New password').fill('passwordpassword');
    await page.getByRole('button', { name: 'Set the password' }).click();
    await expect(page.locator('mat-error')).toContainText(/common|list|guess/i);
    await expect(page.getByLabel('Name')).toHaveValue('Ada Quist');
    await expectAccessible(page);
    await page.getByLabel('New password').fill(first);
    await page.getByRole('button', { name: 'Set the password' }).click();
    await expect(page.getByRole('link', { name: 'Create the first course' })).toBeVisible();
  });

  await test.step('the link worked once', async () => {
    const other = await (await browser.newContext()).newPage();
    await other.goto(ownServer.firstAdministratorLink);
    await expect(other.getByText(/used|no longer|not valid|expired/i).first()).toBeVisible();
    await other.context().close();
  });

  await test.step('a course, and one person added by hand, who is invited by a letter', async () => {
    await page.getByRole('link', { name: 'Create the first course' }).click();
    await page.getByRole('button', { name: 'Create the course' }).click();
    await expect(page.locator('mat-error').first()).toBeVisible();
    await page.getByLabel('Title').fill('Light and quanta');
    await page.getByLabel('Term').fill('autumn term');
    await page.getByLabel('Time zone').fill('Nowhere/Place');
    await page.getByRole('button', { name: 'Create the course' }).click();
    await expect(page.locator('mat-error').first()).toBeVisible();
    await page.getByLabel('Time zone').fill('Europe/Oslo');
    await page.getByRole('button', { name: 'Create the course' }).click();
    await page.getByRole('link', { name: /^Add people/ }).click();
    const adding = page.getByRole('form', { name: 'Add a person' });
    await adding.getByLabel('Name').fill('Noor Fairlie');
    await adding.getByLabel('E-mail').fill('n.fairlie at northmere');
    await adding.getByRole('button', { name: 'Add' }).click();
    await expect(adding.locator('mat-error').first()).toBeVisible();
    await expect(adding.getByLabel('Name')).toHaveValue('Noor Fairlie');
    await adding.getByLabel('E-mail').fill('n.fairlie@northmere.example');
    await adding.getByRole('button', { name: 'Add' }).click();
    await expect(page.getByText('n.fairlie@northmere.example')).toBeVisible();
    await expectAccessible(page);
  });

  const noor = await (await browser.newContext()).newPage();
  await test.step('the invitation lets her in', async () => {
    await noor.goto(await linkTo('n.fairlie@northmere.example'));
    await noor.getByLabel('New password').fill(first);
    await noor.getByRole('button', { name: 'Set the password' }).click();
    await expect(noor.getByRole('heading', { name: 'Needs you now' })).toBeVisible();
  });

  await test.step('a forgotten password is set anew by a letter, and ends the session elsewhere', async () => {
    const elsewhere = await (await browser.newContext()).newPage();
    await elsewhere.goto(at('/forgotten-password'));
    await elsewhere.getByLabel('E-mail').fill('n.fairlie@northmere.example');
    await elsewhere.getByRole('button', { name: 'Send the link' }).click();
    await expect(elsewhere.getByRole('heading', { name: 'Look into your mail' })).toBeVisible();
    await expectAccessible(elsewhere);
    await expect.poll(() => post.latestTo('n.fairlie@northmere.example')?.subject).toMatch(/password/i);
    await elsewhere.goto(await linkTo('n.fairlie@northmere.example'));
    await elsewhere.getByLabel('New password').fill(second);
    await elsewhere.getByRole('button', { name: 'Set the password' }).click();
    await expect(elsewhere.getByRole('heading', { name: 'Needs you now' })).toBeVisible();
    await noor.reload();
    await expect(noor.getByRole('heading', { name: 'Sign in' })).toBeVisible();
    await noor.getByLabel('E-mail').fill('n.fairlie@northmere.example');
    await noor.getByLabel('Password', { exact: true }).fill(first);
    await noor.getByRole('button', { name: 'Sign in' }).click();
    await expect(noor.getByRole('alert')).not.toBeEmpty();
    await noor.getByLabel('Password', { exact: true }).fill(second);
    await noor.getByRole('button', { name: 'Sign in' }).click();
    await expect(noor.getByRole('heading', { name: 'Needs you now' })).toBeVisible();
  });

  await test.step('signing out everywhere ends the other session too', async () => {
    await noor.goto(at('/account'));
    await expectAccessible(noor);
    await noor.getByRole('button', { name: 'Sign out everywhere' }).click();
    await expect(noor.getByRole('heading', { name: 'Sign in' })).toBeVisible();
    await noor.goto(at('/account'));
    await expect(noor.getByRole('heading', { name: 'Sign in' })).toBeVisible();
  });

  await post.stop();
});
