// `npm run dev`: the client with live reload and the server restarting, while both are being worked on.
// The browser talks to Angular's development server, which hands `/api` and live events on to ours.
import { spawn } from 'node:child_process';
import { join } from 'node:path';
import { serverBuild } from './build-server.mjs';
import { demandNode } from './check-machine.mjs';
import { installPackages } from './install-packages.mjs';
import { root } from './root.mjs';
import { leaveSignalsAlone, passSignalsOn } from './run-command.mjs';

process.chdir(root);
demandNode();
passSignalsOn();
await installPackages();
leaveSignalsAlone();

const port = Number(process.env['PORT'] || 4300);
const serverPort = port + 1;
const folder = 'dist/dev-server';

/** @type {import('node:child_process').ChildProcess | null} */
let server = null;
let stopping = false;

function startServer() {
  const child = spawn(process.execPath, ['--enable-source-maps', join(folder, 'main.mjs')], {
    // In a group of its own, so that Ctrl-C reaches it once, from here.
    detached: true,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: {
      ...process.env,
      NODE_ENV: 'development',
      PORT: String(serverPort),
      // The address in links and of requests is the one in the browser.
      ORIGIN: process.env['ORIGIN'] || `http://localhost:${String(port)}`,
    },
  });
  child.on('exit', (code) => {
    if (server === child) server = null;
    if (code && !stopping) console.error('The server has stopped; it starts again with the next change.');
  });
  server = child;
}

/** @returns {Promise<void>} */
function stopServer() {
  const child = server;
  if (!child) return Promise.resolve();
  return new Promise((resolve) => {
    child.on('exit', () => {
      resolve();
    });
    child.kill('SIGTERM');
  });
}

const { context, formatMessages } = await import('esbuild');
const build = await context({
  ...serverBuild(folder),
  plugins: [
    {
      name: 'restart',
      setup: ({ onEnd }) => {
        onEnd(async ({ errors }) => {
          if (errors.length > 0) {
            // What runs goes on running until the fault is mended.
            console.error((await formatMessages(errors, { kind: 'error', color: true })).join(''));
            return;
          }
          if (stopping) return;
          if (server) console.log('The server’s sources have changed: it starts again.');
          await stopServer();
          startServer();
        });
      },
    },
  ],
});
await build.watch();

const client = spawn(
  process.execPath,
  [join(root, 'node_modules', '@angular', 'cli', 'bin', 'ng.js'), 'serve', '--port', String(port)],
  {
    detached: true,
    stdio: ['ignore', 'inherit', 'inherit'],
    env: { ...process.env, NG_CLI_ANALYTICS: 'false', HALFSILVER_SERVER: `http://localhost:${String(serverPort)}` },
  },
);
client.on('exit', () => void stop());

async function stop() {
  if (stopping) return;
  stopping = true;
  client.kill('SIGTERM');
  await Promise.all([build.dispose(), stopServer()]);
  process.exit(0);
}
process.on('SIGINT', () => void stop());
process.on('SIGTERM', () => void stop());
