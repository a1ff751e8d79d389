import { mkdirSync, rmSync, writeFileSync } from 'node:fs';
import { dirname, join } from 'node:path';
import { buildServer } from './build-server.mjs';
import { filesUnder, hashFiles, isOutdated } from './hash-inputs.mjs';
import { precompress } from './precompress.mjs';
import { root } from './root.mjs';
import { runCommand } from './run-command.mjs';

/** @param {string} path */
const isSource = (path) => !/\.spec\.ts$|(^|\/)testing\//.test(path);
/** @param {string} path */
const isCode = (path) => isSource(path) && /\.(ts|json)$/.test(path);

/**
 * What the client and the server are made from, and how.
 *
 * @type {readonly {
 *   readonly name: string, readonly folder: string, readonly sources: readonly string[],
 *   readonly counts: (path: string) => boolean, readonly make: () => Promise<void>
 * }[]}
 */
const halves = [
  {
    name: 'client',
    folder: 'dist/client',
    sources: [
      ...['src', 'shared', 'public', 'fonts', 'angular.json', 'tsconfig.json', 'tsconfig.app.json'],
      ...['package-lock.json', 'scripts/build-program.mjs', 'scripts/precompress.mjs'],
    ],
    counts: isSource,
    make: makeClient,
  },
  {
    name: 'server',
    folder: 'dist/server',
    sources: [
      ...['server', 'shared', 'drizzle', 'demo', 'tsconfig.json', 'package-lock.json'],
      ...['scripts/build-program.mjs', 'scripts/build-server.mjs'],
    ],
    // The demonstration's own files are read when it is loaded; only code is built in.
    counts: (path) => isCode(path) || path.startsWith('scripts/'),
    make: () => buildServer('dist/server'),
  },
];

/**
 * Builds those halves of the program whose sources have changed since they were built.
 *
 * @param {readonly string[]} [wanted] `client`, `server`; both where nothing is said
 * @throws Error with the compiler's output where one cannot be built
 */
export async function buildProgram(wanted = ['client', 'server']) {
  for (const { name, folder, sources, counts, make } of halves) {
    if (!wanted.includes(name)) continue;
    const marker = join(root, folder, 'built-from');
    const hash = hashFiles(root, filesUnder(root, sources, counts));
    if (!isOutdated(marker, hash)) continue;
    const began = Date.now();
    console.log(`Building the ${name} …`);
    // Whatever happens now, what lies there is no longer known to be whole.
    rmSync(marker, { force: true });
    await make();
    mkdirSync(dirname(marker), { recursive: true });
    writeFileSync(marker, hash);
    console.log(`Built the ${name} (${String(Math.round((Date.now() - began) / 1000))} s).`);
  }
}

async function makeClient() {
  const ng = join(root, 'node_modules', '@angular', 'cli', 'bin', 'ng.js');
  const { code, output } = await runCommand(process.execPath, [ng, 'build', '--configuration', 'production'], {
    env: { NG_CLI_ANALYTICS: 'false', NO_COLOR: '1' },
    quiet: true,
  });
  if (code !== 0) throw new Error(`The client could not be built.\n${firstLines(output.trim(), 80)}`);
  for (const warning of output.split('\n').filter((line) => line.includes('[WARNING]'))) console.warn(warning.trim());
  await precompress(join(root, 'dist', 'client', 'browser'));
}

/**
 * @param {string} text
 * @param {number} most
 */
function firstLines(text, most) {
  const lines = text.split('\n');
  return lines.length <= most
    ? text
    : [...lines.slice(0, most), `… ${String(lines.length - most)} lines more`].join('\n');
}
