// `npm run pictures`: the README's four pictures, taken from the running program with the demonstration course.
import { chromium, type Page } from '@playwright/test';
import { join } from 'node:path';
import { findDemonstration, people } from '../e2e/demonstration';
import { signIn } from '../e2e/sign-in';
import { chromiumPath, installChromium } from './install-chromium.mjs';
import { root } from './root.mjs';
import { startDemonstration } from './start-demonstration.mjs';

const missing = await installChromium();
if (missing) throw new Error(missing);
const demonstration = await startDemonstration();
const browser = await chromium.launch({ executablePath: chromiumPath });
try {
  const open = async () =>
    (
      await browser.newContext({
        baseURL: demonstration.origin,
        viewport: { width: 1440, height: 900 },
        reducedMotion: 'reduce',
        locale: 'en-GB',
      })
    ).newPage();
  const lead = await open();
  const { courseId, setIds, pileId, problemId } = await findDemonstration(lead);
  const course = `/courses/${courseId}`;
  await take(lead, 'problem', `${course}/problems/${problemId}?at=b`);
  const marker = await open();
  await signIn(marker, people.marker);
  await take(marker, 'bench', `${course}/marking/${pileId}`);
  const student = await open();
  await signIn(student, people.student);
  await take(student, 'sheet', `${course}/sheets/${setIds[3] ?? ''}`);
  await take(student, 'feedback', `${course}/feedback/${setIds[1] ?? ''}`);
} finally {
  await browser.close();
  await demonstration.stop();
}

/** A picture of a page once it stands still. */
async function take(page: Page, name: string, address: string): Promise<void> {
  await page.goto(address);
  await page.getByRole('heading', { level: 1 }).waitFor();
  await page.waitForLoadState('networkidle');
  await page.waitForTimeout(1_500);
  const path = join('docs', 'pictures', `${name}.png`);
  await page.screenshot({ path: join(root, path) });
  console.log(path);
}
