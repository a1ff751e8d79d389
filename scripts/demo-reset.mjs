// `npm run demo:reset`: empties the database and loads the demonstration course anew. `-- --yes` does not ask.
import { existsSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { createInterface } from 'node:readline/promises';
import { buildProgram } from './build-program.mjs';
import { demandNode } from './check-machine.mjs';
import { installPackages } from './install-packages.mjs';
import { root } from './root.mjs';
import { passSignalsOn } from './run-command.mjs';
import { startServer } from './start-server.mjs';

process.chdir(root);
demandNode();
passSignalsOn();
await installPackages();

const dataDir = process.env['DATA_DIR'] || 'data';
const database = join(dataDir, 'halfsilver.db');

try {
  if (existsSync(database)) {
    if (await isInUse(database)) throw new Error(`A server is running on ${dataDir}. Stop it first (Ctrl-C).`);
    if (!process.argv.includes('--yes') && !(await agrees()))
      throw new Error('Nothing was changed. To reset without being asked: npm run demo:reset -- --yes');
    for (const end of ['', '-wal', '-shm']) rmSync(`${database}${end}`, { force: true });
    for (const folder of ['files', 'loading']) rmSync(join(dataDir, folder), { recursive: true, force: true });
  }
  await buildProgram(['server']);
  // A server fills an empty database when it starts; on a port that nobody knows, and no longer than that.
  const server = await startServer({ DATA_DIR: dataDir, DEMO: 'on', PORT: '0', LOG_LEVEL: 'error' }, true);
  await server.stop();
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}
console.log('The demonstration course is as it was at first. Start with: npm start');
// Signals are listened for until here.
process.exit(0);

/**
 * Whether another program has a database open: SQLite leaves write-ahead mode only for its last user.
 *
 * @param {string} path
 */
async function isInUse(path) {
  const { default: Database } = await import('better-sqlite3');
  const opened = new Database(path, { timeout: 0 });
  try {
    opened.pragma('journal_mode = DELETE');
    return false;
  } catch (error) {
    if (/** @type {{ code?: string }} */ (error).code?.startsWith('SQLITE_BUSY')) return true;
    // What is no database is in nobody's use.
    return false;
  } finally {
    opened.close();
  }
}

async function agrees() {
  if (!process.stdin.isTTY) return false;
  const terminal = createInterface({ input: process.stdin, output: process.stdout });
  const answer = await terminal.question(
    `This removes everything in ${dataDir}: accounts, courses, scripts, marks, files. Go on? (yes/no) `,
  );
  terminal.close();
  return answer.trim().toLowerCase() === 'yes';
}
