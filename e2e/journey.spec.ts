import type { Browser, Page } from '@playwright/test';
import { expect, expectAccessible, test } from './own-server';

const password = 'a phrase for the bench';
const title = 'A splitter and a counter';
const statement = [
  'A coherent beam of mean photon number $\\bar n = \\val{nbar}$ enters input 1 of a beam splitter of transmittance',
  '$T = \\val{T}$; input 2 is dark.',
  '',
  '(a) How many photons leave at output 2 on average?',
  '(b) With what probability does an ideal counter at output 2 record nothing?',
].join('\n');
const light = 'output(beamSplitter(product(coherent(sqrt(nbar)), vacuum()), T), 2)';

/** People of the journey by role; everybody is invented. */
const roster = [
  'name,email,role',
  'Idris Vane,i.vane@northmere.example,marker',
  'Tamsin Oduya,t.oduya@northmere.example,marker',
  'Noor Fairlie,n.fairlie@northmere.example,student',
  'Bela Hovde,b.hovde@northmere.example,student',
  'Cato Mohn,c.mohn@northmere.example,student',
  'Dagny Orre,d.orre@northmere.example,student',
].join('\n');

test('a problem is written, set, answered, marked by two at once, released and read', async ({
  browser,
  ownServer,
}) => {
  test.setTimeout(240_000);
  const at = (path: string) => `${ownServer.origin}${path}`;
  const lead = await openPage(browser);

  await test.step('an administrator creates the first course and adds people from a file', async () => {
    await lead.goto(ownServer.firstAdministratorLink);
    await lead.getByLabel('Name').fill('Ada Quist');
    await lead.getByLabel('E-mail').fill('a.quist@northmere.example');
    await lead.getByLabel('New password').fill(password);
    await lead.getByRole('button', { name: 'Set the password' }).click();
    await expectAccessible(lead);
    await lead.getByRole('link', { name: 'Create the first course' }).click();
    await lead.getByLabel('Title').fill('Light and quanta');
    await lead.getByLabel('Term').fill('autumn term');
    await lead.getByLabel('Time zone').fill('Europe/Oslo');
    await lead.getByRole('button', { name: 'Create the course' }).click();
    await expect(lead.getByRole('heading', { name: 'Needs you now' })).toBeVisible();
    await expectAccessible(lead);
    await lead.getByRole('link', { name: /^Add people/ }).click();
    await lead.getByRole('link', { name: 'Add from a file' }).click();
    await lead.getByLabel('Or paste the lines').fill(`${roster}\nNobody,not an address,student`);
    await lead.getByRole('button', { name: 'Look at every line' }).click();
    await expect(lead.getByText('1 line is wrong')).toBeVisible();
    await expect(lead.getByRole('cell', { name: /not an e-mail address/ })).toBeVisible();
    await expectAccessible(lead);
    await lead.getByLabel('Or paste the lines').fill(roster);
    await lead.getByRole('button', { name: 'Look at every line' }).click();
    await lead.getByRole('button', { name: 'Add 6 people' }).click();
    await expect(lead.getByText('6 people were added')).toBeVisible();
  });

  const courseId = /courses\/([0-9a-f-]{36})/.exec(lead.url())?.[1] ?? '';
  const course = (path: string) => at(`/courses/${courseId}/${path}`);

  await test.step('the lead writes a problem whose keys are computed while it is typed', async () => {
    await lead.goto(course('problems'));
    await expectAccessible(lead);
    await lead.getByRole('button', { name: 'New problem' }).first().click();
    await lead.getByLabel('Title of the new problem').fill(title);
    await lead.getByRole('button', { name: 'Begin' }).click();
    await lead.getByRole('textbox', { name: 'Statement' }).fill(statement);
    await lead.getByRole('button', { name: 'nbar, which the statement uses' }).click();
    await lead.getByRole('button', { name: 'T, which the statement uses' }).click();
    await drawGiven(lead, 'nbar', '\\bar n', ['2', '8', '0.5']);
    await drawGiven(lead, 'T', 'T', ['0.30', '0.90', '0.05']);
    await addNumberPart(lead, 'a', `meanPhotons(${light})`);
    await addNumberPart(lead, 'b', `photonProbability(${light}, 0`);
    await expect(lead.getByText(/Parenthesis \) expected|end of expression/i).first()).toBeVisible();
    await typeKey(lead, 'b', `photonProbability(${light}, 0)`);
    await expect(lead.getByText(/two methods agree to \d+ digits/).first()).toBeVisible();
    await expectAccessible(lead);
    await lead.getByRole('button', { name: 'Save as revision 1' }).click();
    await lead.getByLabel('What is new in revision 1').fill('First wording');
    await lead.getByRole('button', { name: 'Save revision 1' }).click();
    await expect(lead.getByRole('button', { name: 'Save as revision 2' })).toBeDisabled();
    await expect(lead.getByText('Nobody has signed off revision 1 yet.')).toBeVisible();
    await lead.getByRole('button', { name: 'Use without a sign-off' }).click();
    await lead.getByLabel('Why revision 1 is used without a sign-off').fill('Nobody else teaches this term.');
    await lead.getByRole('button', { name: 'Overrule' }).click();
    await expect(lead.getByText('Ada Quist let revision 1 be used without a sign-off.')).toBeVisible();
    await markReady(lead);
    await expect(lead.getByText(/revision 1, ready/)).toBeVisible();
    await expectAccessible(lead);
  });

  await test.step('the lead builds a set and opens it', async () => {
    await lead.goto(course('sets/new'));
    await lead.getByLabel('Title').fill('Counting behind a mirror');
    await lead.getByLabel('Closes').fill(wallClock(7 * 24 * 3_600_000));
    await lead.getByRole('button', { name: `Add: ${title}` }).click();
    await expectAccessible(lead);
    await lead.getByRole('button', { name: 'Begin the set' }).click();
    await expect(lead.getByRole('heading', { name: /Counting behind a mirror/ })).toBeVisible();
    await expectAccessible(lead);
    await moveOn(lead, ['review', 'ready', 'open']);
  });

  const students: Page[] = [];
  for (const name of ['Noor Fairlie', 'Bela Hovde', 'Cato Mohn', 'Dagny Orre'])
    students.push(await enter(browser, lead, courseId, name, ownServer.origin));
  const [noor] = students;
  if (!noor) throw new Error('Nobody answers.');

  await test.step('students answer, see how they are read, and submit with a receipt', async () => {
    for (const [index, page] of students.entries()) {
      await page
        .getByRole('link', { name: /^Open the sheet/ })
        .first()
        .click();
      await expect(page.getByRole('heading', { name: title })).toBeVisible();
      await page.getByRole('textbox', { name: /\(a\)/ }).fill(index === 0 ? '1,234' : '41');
      await page.getByRole('textbox', { name: /\(b\)/ }).fill(index === 1 ? '5/3' : '3.7e-1 x');
    }
    await expect(noor.getByText(/Is 1,234 /)).toBeVisible();
    await noor.getByRole('button', { name: '1.234' }).click();
    await expect(noor.getByText(/all kept/)).toBeVisible();
    await expectAccessible(noor);
    for (const [index, page] of students.entries()) {
      await page.getByRole('button', { name: 'Submit', exact: true }).first().click();
      // Who leaves a question open is asked once more.
      if (index !== 1) await page.getByRole('button', { name: 'Submit as it is' }).click();
      await expect(page.getByRole('heading', { name: /Submitted: Set 1/ })).toBeVisible();
    }
    await expectAccessible(noor);
  });

  await test.step('before the release a student sees neither key nor mark', async () => {
    await noor.goto(course('feedback'));
    await expect(noor.getByText(/Counting behind a mirror/)).toHaveCount(0);
    await expectAccessible(noor);
  });

  await test.step('the lead closes the set and opens the marking', async () => {
    await lead.goto(course('sets'));
    await expectAccessible(lead);
    await lead
      .getByRole('link', { name: 'Set 1', exact: true })
      .or(lead.getByRole('link', { name: /: Set 1$/ }))
      .first()
      .click();
    await expect(lead.getByRole('heading', { name: /Counting behind a mirror/ })).toBeVisible();
    await moveOn(lead, ['closed', 'marking']);
  });

  const idris = await enter(browser, lead, courseId, 'Idris Vane', ownServer.origin);
  const tamsin = await enter(browser, lead, courseId, 'Tamsin Oduya', ownServer.origin);

  await test.step('two markers mark one pile at the same time and see each other do it', async () => {
    for (const page of [idris, tamsin]) {
      await page.goto(course('marking'));
      await expect(page.getByRole('heading', { level: 1 })).toBeVisible();
      await expectAccessible(page);
      await page.getByRole('link', { name: /\(b\)/ }).first().click();
      await expectMarked(page, 0);
      await expect(page.getByRole('article', { name: /in hand, held by you/ })).toBeVisible();
    }
    const codeOf = (page: Page) =>
      page.getByRole('article', { name: /in hand, held by you/ }).getAttribute('aria-label');
    expect(await codeOf(idris)).not.toBe(await codeOf(tamsin));
    await expectAccessible(idris);

    // Each sees the other's mark within a second, without reloading; four saves by two make four marks.
    const marked = (page: Page, count: number) => expectMarked(page, count, 1_000);
    await idris.getByRole('textbox', { name: 'Remark' }).fill('The mean is right; its Poisson weight is missing.');
    await idris.keyboard.press('Control+Enter');
    await marked(tamsin, 1);
    await tamsin.keyboard.press('Control+Enter');
    await marked(idris, 2);
    await expect(idris.getByRole('article', { name: /in hand, held by you/ })).toBeVisible();
    await idris.keyboard.press('Control+Enter');
    await marked(tamsin, 3);
    await expect(idris.getByRole('article', { name: /in hand, held by you/ })).toBeVisible();
    await idris.keyboard.press('Control+Enter');
    await marked(tamsin, 4);
  });

  await test.step('what is left is marked, and the lead releases', async () => {
    await markWhatIsLeft(idris, course('marking'));
    await lead.goto(course('desk'));
    await lead.getByRole('link', { name: /^Look at the release/ }).click();
    await expect(lead.getByText('A computed check is evidence, not a decision')).toBeVisible();
    await expectAccessible(lead);
    await lead.getByRole('button', { name: /^Release Set 1/ }).click();
    await expect(lead.getByText(/released/).first()).toBeVisible();
  });

  await test.step('the student reads exactly what was released', async () => {
    await noor.goto(course('desk'));
    await noor
      .getByRole('link', { name: /^Read the feedback/ })
      .first()
      .click();
    await expect(noor.getByRole('heading', { name: title })).toBeVisible();
    await expect(noor.getByText('1.234').first()).toBeVisible();
    await expect(noor.getByText(/Idris|Tamsin/)).toHaveCount(0);
    await expectAccessible(noor);
  });
});

async function openPage(browser: Browser): Promise<Page> {
  return (await browser.newContext({ viewport: { width: 1440, height: 900 }, locale: 'en-GB' })).newPage();
}

/** Sets a password by the link that the lead hands over, since no mail server is set up. */
async function enter(browser: Browser, lead: Page, courseId: string, name: string, origin: string): Promise<Page> {
  await lead.goto(`${origin}/courses/${courseId}/people?search=${encodeURIComponent(name)}`);
  await lead.getByRole('button', { name: `More for ${name}` }).click();
  await lead.getByRole('menuitem', { name: 'Invite again' }).click();
  const link = await lead.getByText(/\/welcome#/).textContent();
  const page = await openPage(browser);
  await page.goto((link ?? '').trim());
  await page.getByLabel('New password').fill(`${password} of ${name}`);
  await page.getByRole('button', { name: 'Set the password' }).click();
  await expect(page.getByRole('heading', { name: 'Needs you now' })).toBeVisible();
  return page;
}

async function drawGiven(page: Page, name: string, symbol: string, [from, to, step]: readonly string[]): Promise<void> {
  const row = page
    .getByRole('row')
    .filter({ has: page.getByRole('textbox', { name: new RegExp(`^Name of .*${name}`) }) });
  await row.getByRole('textbox', { name: /^Symbol/ }).fill(symbol);
  await row.getByRole('combobox').selectOption({ label: 'drawn from a range' });
  await row.getByRole('textbox', { name: 'from' }).fill(from ?? '');
  await row.getByRole('textbox', { name: 'to', exact: true }).fill(to ?? '');
  await row.getByRole('textbox', { name: 'step' }).fill(step ?? '');
}

async function addNumberPart(page: Page, label: string, key: string): Promise<void> {
  await page.getByRole('button', { name: 'Part', exact: true }).click();
  await typeKey(page, label, key);
  await page.getByRole('textbox', { name: 'relative' }).fill('1%');
}

async function markReady(page: Page): Promise<void> {
  await page.getByRole('button', { name: 'More', exact: true }).click();
  await page.getByRole('menuitem', { name: /ready/i }).click();
}

async function typeKey(page: Page, label: string, key: string): Promise<void> {
  await page.getByRole('textbox', { name: `Key of (${label})` }).fill(key);
}

/** Walks a set along its stages by the page's own next action. */
async function moveOn(page: Page, stages: readonly string[]): Promise<void> {
  for (const stage of stages) {
    const url = new URL(page.url());
    url.searchParams.set('move', stage);
    await page.goto(url.href);
    await expectAccessible(page);
    await page.getByRole('region', { name: /Set 1/ }).getByRole('button').first().click();
    await expect(page.getByRole('img', { name: new RegExp(`now ${stage}`) })).toBeVisible();
  }
}

async function markWhatIsLeft(page: Page, piles: string): Promise<void> {
  await page.goto(piles);
  await page.getByRole('link', { name: /\(a\)/ }).first().click();
  for (let marked = 0; marked < 4; marked += 1) {
    await expectMarked(page, marked);
    await expect(page.getByRole('article', { name: /in hand, held by you/ })).toBeVisible();
    await page.keyboard.press('Control+Enter');
  }
  await expectMarked(page, 4);
}

/** What a `datetime-local` field takes, so much later than now. */
function wallClock(later: number): string {
  return new Date(Date.now() + later).toISOString().slice(0, 16);
}

/** Expects that a bench says how many of its four answers are marked. */
async function expectMarked(page: Page, count: number, timeout?: number): Promise<void> {
  const said = page.getByRole('status').filter({ hasText: `${String(count)} of 4 marked` });
  await expect(said).toBeVisible(timeout === undefined ? {} : { timeout });
}
