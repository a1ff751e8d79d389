import { mkdtempSync, rmSync } from 'node:fs';
import { createServer } from 'node:net';
import { once } from 'node:events';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { buildProgram } from './build-program.mjs';
import { root } from './root.mjs';
import { startServer } from './start-server.mjs';

/**
 * The program, built if need be, on a port of its own with a demonstration course of its own, which goes when it stops.
 *
 * @returns {Promise<{ readonly origin: string, readonly stop: () => Promise<void> }>}
 */
export async function startDemonstration() {
  process.chdir(root);
  await buildProgram();
  const dataDir = mkdtempSync(join(tmpdir(), 'halfsilver-demonstration-'));
  const port = String(await freePort());
  const origin = `http://localhost:${port}`;
  const env = { DATA_DIR: dataDir, PORT: port, ORIGIN: origin, DEMO: 'on', LOG_LEVEL: 'warn' };
  const server = await startServer(env, true);
  return {
    origin,
    async stop() {
      await server.stop();
      rmSync(dataDir, { recursive: true, force: true });
    },
  };
}

/** A port that nothing listens on. */
export async function freePort() {
  const probe = createServer().listen(0);
  await once(probe, 'listening');
  const address = probe.address();
  probe.close();
  if (!address || typeof address !== 'object') throw new Error('No free port was found.');
  return address.port;
}
