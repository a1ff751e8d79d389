import { mkdtempSync, rmSync } from 'node:fs';

import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { freePort } from '../scripts/start-demonstration.mjs';
import { startServer, type RunningServer } from '../scripts/start-server.mjs';
import { test as base } from './fixtures';

/** A server that belongs to one test: empty, and free to be killed. */
export class OwnServer {
  private running: RunningServer | null = null;

  constructor(
    readonly origin: string,
    private readonly env: Readonly<Record<string, string>>,
  ) {}

  /**
   * Starts it on the data that it has.
   *
   * @param env settings beside those of every test's server
   */
  async start(env: Readonly<Record<string, string>> = {}): Promise<void> {
    this.running = await startServer({ ...this.env, ...env });
  }

  /** Stops it as Ctrl-C would. */
  async stop(): Promise<void> {
    await this.running?.stop();
    this.running = null;
  }

  /** Ends it with SIGKILL, in the middle of whatever it does. */
  async kill(): Promise<void> {
    await this.running?.kill();
    this.running = null;
  }

  /** The link that creates the first administrator, as the server printed it when it started. */
  get firstAdministratorLink(): string {
    const link = this.running
      ?.printed()
      .split('\n')
      .find((line) => line.startsWith(`${this.origin}/`));
    if (!link) throw new Error('The server printed no link for a first administrator.');
    return link;
  }
}

/** The tests' `test`, with an empty installation (`DEMO=off`) of the test's own, already started. */
export const test = base.extend<{ ownServer: OwnServer }>({
  ownServer: async ({ browser }, use) => {
    const dataDir = mkdtempSync(join(tmpdir(), 'halfsilver-own-'));
    const port = String(await freePort());
    const origin = `http://localhost:${port}`;
    const env = { DATA_DIR: dataDir, PORT: port, ORIGIN: origin, DEMO: 'off', NODE_ENV: 'test', LOG_LEVEL: 'warn' };
    const server = new OwnServer(origin, env);
    await server.start();
    await use(server);
    // Pages that are still open would look for it, and say on the console that it is gone.
    for (const context of browser.contexts()) await context.close();
    await server.stop();
    rmSync(dataDir, { recursive: true, force: true });
  },
});

export { expect, expectAccessible } from './fixtures';
