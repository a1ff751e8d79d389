// The server that browser tests talk to: built if need be, with data of its own that go when it stops.
import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { buildProgram } from './build-program.mjs';
import { root } from './root.mjs';
import { startServer } from './start-server.mjs';

process.chdir(root);
const dataDir = mkdtempSync(join(tmpdir(), 'halfsilver-e2e-'));
process.on('exit', () => {
  rmSync(dataDir, { recursive: true, force: true });
});

/** @type {import('./start-server.mjs').RunningServer | null} */
let server = null;
let stopping = false;
async function stop() {
  stopping = true;
  await server?.stop();
  process.exit(0);
}
process.on('SIGTERM', () => void stop());
process.on('SIGINT', () => void stop());

try {
  await buildProgram();
  server = await startServer({ DATA_DIR: dataDir, NODE_ENV: 'test', LOG_LEVEL: 'warn' });
  await server.ended;
  if (!stopping) console.error(`The server has ended.\n${server.printed()}`);
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
}
if (!stopping) process.exit(1);
