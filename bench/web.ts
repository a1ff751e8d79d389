// `npm run bench:web`: how much the sign-in page downloads, and how soon the main pages show and hold still, in Chromium
// with a processor four times slower. Pages are measured beside a bare one in the same run.
import { chromium, type Browser, type BrowserContext, type Page } from '@playwright/test';
import { findDemonstration, people } from '../e2e/demonstration';
import { signIn } from '../e2e/sign-in';
import { chromiumPath, installChromium } from '../scripts/install-chromium.mjs';
import { startDemonstration } from '../scripts/start-demonstration.mjs';

const slowdown = 4;
const rounds = 5;
const goals = { download: 220, paint: 1.5, shift: 0.02 };

/** What one loading of a page came to; paint in seconds, download in kB as they travelled. */
interface Loading {
  readonly paint: number;
  readonly shift: number;
  readonly download: number;
  readonly byKind: Readonly<Record<string, number>>;
}

const missing = await installChromium();
if (missing) throw new Error(missing);
const demonstration = await startDemonstration();
const browser = await chromium.launch({
  executablePath: chromiumPath,
  args: ['--disable-background-networking', '--disable-component-update', '--disable-sync', '--no-first-run'],
});
try {
  await measureAll(browser, demonstration.origin);
} finally {
  await browser.close();
  await demonstration.stop();
}

async function measureAll(browser: Browser, origin: string): Promise<void> {
  const found = await withContext(browser, origin, null, async (context) => findDemonstration(await context.newPage()));
  const course = `/courses/${found.courseId}`;
  const pages = [
    { name: 'a bare page', email: null, path: '/api/health' },
    { name: 'sign-in', email: null, path: '/sign-in' },
    { name: 'desk', email: people.lead, path: `${course}/desk` },
    { name: 'sheet', email: people.student, path: `${course}/sheets/${found.setIds[3] ?? ''}` },
    { name: 'bench', email: people.marker, path: `${course}/marking/${found.pileId}` },
  ];
  console.log(`Medians of ${String(rounds)} loadings without a cache, processor ${String(slowdown)} times slower.\n`);
  console.log('page           paint s  of a bare page   layout shift   download kB');
  let bare = 0;
  for (const { name, email, path } of pages) {
    const loadings = await withContext(browser, origin, email, async (context) => {
      const all: Loading[] = [];
      for (let round = 0; round < rounds; round++) all.push(await load(context, path));
      return all;
    });
    const paint = median(loadings.map((each) => each.paint));
    const shift = Math.max(...loadings.map((each) => each.shift));
    const download = median(loadings.map((each) => each.download));
    bare ||= paint;
    const missed = [
      name !== 'a bare page' && paint > goals.paint ? `paint over ${String(goals.paint)} s` : '',
      shift > goals.shift ? `shift over ${String(goals.shift)}` : '',
      name === 'sign-in' && download > goals.download ? `download over ${String(goals.download)} kB` : '',
    ].filter(Boolean);
    console.log(
      [
        name.padEnd(14),
        paint.toFixed(2).padStart(7),
        `${(paint / bare).toFixed(1)} ×`.padStart(15),
        shift.toFixed(3).padStart(14),
        download.toFixed(0).padStart(13),
        missed.length > 0 ? `   ${missed.join(', ')}` : '',
      ].join(' '),
    );
    if (name === 'sign-in')
      for (const [kind, size] of Object.entries(loadings[0]?.byKind ?? {}))
        console.log(`  ${kind.padEnd(60)} ${size.toFixed(1).padStart(5)}`);
  }
  console.log(
    `\nGoals: paint at most ${String(goals.paint)} s, shift at most ${String(goals.shift)}, sign-in at most ${String(goals.download)} kB.`,
  );
}

/** Does something in a browser context of its own, signed in where there is an address. */
async function withContext<Result>(
  browser: Browser,
  origin: string,
  email: string | null,
  act: (context: BrowserContext) => Promise<Result>,
): Promise<Result> {
  const context = await browser.newContext({ baseURL: origin, viewport: { width: 1440, height: 900 } });
  try {
    if (email) {
      const page = await context.newPage();
      await signIn(page, email);
      await page.close();
    }
    return await act(context);
  } finally {
    await context.close();
  }
}

async function load(context: BrowserContext, path: string): Promise<Loading> {
  const page = await context.newPage();
  const devtools = await context.newCDPSession(page);
  await devtools.send('Network.setCacheDisabled', { cacheDisabled: true });
  await devtools.send('Emulation.setCPUThrottlingRate', { rate: slowdown });
  await page.addInitScript(observe);
  await page.goto(path);
  await page.waitForLoadState('networkidle');
  // What comes late must count too.
  await page.waitForTimeout(1_500);
  const loading = await readObserved(page);
  await page.close();
  return loading;
}

/** Runs in the page before anything else of it. */
function observe(): void {
  const seen = { paint: 0, shift: 0 };
  Object.assign(window, { seen });
  new PerformanceObserver((list) => {
    for (const entry of list.getEntries()) seen.paint = entry.startTime / 1000;
  }).observe({ type: 'largest-contentful-paint', buffered: true });
  new PerformanceObserver((list) => {
    for (const entry of list.getEntries())
      if ('value' in entry && typeof entry.value === 'number') seen.shift += entry.value;
  }).observe({ type: 'layout-shift', buffered: true });
}

async function readObserved(page: Page): Promise<Loading> {
  return page.evaluate(() => {
    const { seen } = window as unknown as { seen: { paint: number; shift: number } };
    const entries = [
      ...performance.getEntriesByType('navigation'),
      ...performance.getEntriesByType('resource'),
    ] as PerformanceResourceTiming[];
    const counted = entries.filter(({ name }) => !name.includes('/api/') && !name.includes('/live/'));
    const byKind = Object.fromEntries(
      counted.map((each) => [new URL(each.name).pathname, each.encodedBodySize / 1000] as const),
    );
    return { ...seen, download: counted.reduce((sum, each) => sum + each.encodedBodySize / 1000, 0), byKind };
  });
}

function median(values: readonly number[]): number {
  return [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)] ?? 0;
}
