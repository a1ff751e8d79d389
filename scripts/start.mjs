// `npm start`: everything from a fresh clone to a running server. package.json says `exec`, so that no shell stands between
// npm and this program: it would die of Ctrl-C before us, and pass no signal on.
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { buildProgram } from './build-program.mjs';
import { demandNode } from './check-machine.mjs';
import { installPackages } from './install-packages.mjs';
import { root } from './root.mjs';
import { leaveSignalsAlone, passSignalsOn } from './run-command.mjs';

process.chdir(root);
demandNode();
passSignalsOn();
await installPackages();
try {
  await buildProgram();
} catch (error) {
  console.error(error instanceof Error ? error.message : error);
  process.exit(1);
}

// The server takes this process over, so that Ctrl-C and signals reach it directly, and once.
leaveSignalsAlone();
process.setSourceMapsEnabled(true);
await import(pathToFileURL(join(root, 'dist', 'server', 'main.mjs')).href);
