import { execFileSync } from 'node:child_process';
import { defineConfig, devices } from '@playwright/test';
import { chromiumPath } from './scripts/install-chromium.mjs';

// The configuration is read again in every worker: what is decided here once is kept in the environment.
const running = process.env['E2E_BASE_URL'];
const port = (process.env['E2E_PORT'] ??= running ? '' : freePort());
const baseURL = running ?? `http://localhost:${port}`;
const report = process.env['PLAYWRIGHT_JSON_OUTPUT_FILE'];

/** Browser tests: a server of their own with the demonstration course, or the one at `E2E_BASE_URL`. */
export default defineConfig({
  testDir: 'e2e',
  timeout: 60_000,
  expect: { timeout: 10_000 },
  fullyParallel: false,
  workers: 2,
  retries: 0,
  forbidOnly: true,
  reporter: [['list'], ...(report ? [['json', { outputFile: report }] as const] : [])],
  use: {
    ...devices['Desktop Chrome'],
    baseURL,
    viewport: { width: 1440, height: 900 },
    actionTimeout: 15_000,
    locale: 'en-GB',
    timezoneId: 'Europe/Oslo',
    // Animations are tried by people; tests wait for what they end in.
    contextOptions: { reducedMotion: 'reduce' },
    screenshot: 'only-on-failure',
    trace: 'retain-on-failure',
    launchOptions: {
      executablePath: chromiumPath,
      args: [
        '--disable-background-networking',
        '--disable-component-update',
        '--disable-sync',
        '--no-first-run',
        '--disable-quic',
      ],
    },
  },
  projects: [{ name: 'chromium' }],
  ...(running
    ? {}
    : {
        webServer: {
          command: 'node scripts/serve-for-tests.mjs',
          url: `${baseURL}/api/health`,
          env: { PORT: port, ORIGIN: baseURL, DEMO: process.env['E2E_DEMO'] ?? 'on' },
          // The client may have to be built first, and the demonstration loaded.
          timeout: 300_000,
          stdout: 'pipe' as const,
          stderr: 'pipe' as const,
          gracefulShutdown: { signal: 'SIGTERM' as const, timeout: 10_000 },
        },
      }),
});

/** A port that nothing listens on. Asked of a process of its own, since a configuration cannot wait. */
function freePort(): string {
  const ask = `const s = require('node:net').createServer().listen(0, () => { console.log(s.address().port); s.close(); })`;
  return execFileSync(process.execPath, ['-e', ask], { encoding: 'utf8' }).trim();
}
