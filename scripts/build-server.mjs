import { basename, join } from 'node:path';
import { filesUnder } from './hash-inputs.mjs';
import { root } from './root.mjs';

/**
 * esbuild's options for the server: one entry for the program and one for each worker, all side by side in a folder.
 *
 * @param {string} folder relative to the project's
 * @returns {import('esbuild').BuildOptions}
 */
export function serverBuild(folder) {
  const workers = filesUnder(root, ['server'], (path) => path.endsWith('-worker.ts'));
  return {
    absWorkingDir: root,
    entryPoints: ['server/main.ts', ...workers].map((path) => ({ in: path, out: basename(path, '.ts') })),
    outdir: join(root, folder),
    outExtension: { '.js': '.mjs' },
    bundle: true,
    packages: 'external',
    platform: 'node',
    target: 'node20',
    format: 'esm',
    sourcemap: true,
    logLevel: 'silent',
  };
}

/**
 * Builds the server into a folder.
 *
 * @param {string} folder relative to the project's
 * @throws Error with the places where it cannot be built
 */
export async function buildServer(folder) {
  // Only here, since this module is loaded before the packages are there.
  const { build, formatMessages } = await import('esbuild');
  try {
    await build(serverBuild(folder));
  } catch (error) {
    const errors = /** @type {{ errors?: import('esbuild').Message[] }} */ (error).errors;
    if (!errors) throw error;
    const lines = await formatMessages(errors, { kind: 'error' });
    throw new Error(`The server could not be built.\n${lines.join('').trim()}`, { cause: error });
  }
}
