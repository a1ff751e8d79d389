// Runs a line tool (`key`, `check`) from source: `node scripts/line-tool.mjs server/keys/key-tool.ts`. It is built anew
// each time, which takes a fraction of a second, so that it can never be older than its source.
import { mkdirSync, rmSync } from 'node:fs';
import { join } from 'node:path';
import { pathToFileURL } from 'node:url';
import { installPackages } from './install-packages.mjs';
import { root } from './root.mjs';

const [entry] = process.argv.slice(2);
if (!entry) throw new Error('Name the source of the tool.');

// Standard output belongs to the answers.
const { log } = console;
console.log = console.error;
await installPackages();
console.log = log;

const { build } = await import('esbuild');
// Below node_modules, so that the tool finds the packages.
const folder = join(root, 'node_modules', '.cache', 'halfsilver');
const outfile = join(folder, `${entry.replace(/\W+/g, '-')}-${String(process.pid)}.mjs`);
mkdirSync(folder, { recursive: true });
process.on('exit', () => rmSync(outfile, { force: true }));
await build({
  absWorkingDir: root,
  entryPoints: [entry],
  outfile,
  bundle: true,
  packages: 'external',
  platform: 'node',
  target: 'node20',
  format: 'esm',
});
await import(pathToFileURL(outfile).href);
