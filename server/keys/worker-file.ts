import { createHash } from 'node:crypto';
import { existsSync, mkdirSync, renameSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';

/**
 * The built worker beside the built server. Tests and tools that run from source build it into a cache first.
 *
 * @param name of the source without its ending, for example `key-worker`
 * @param beside address of the module that lies beside it
 */
export async function workerFile(name: string, beside: string): Promise<string> {
  const built = fileURLToPath(new URL(`./${name}.mjs`, beside));
  if (existsSync(built)) return built;
  const { build } = await import('esbuild');
  const { outputFiles } = await build({
    entryPoints: [fileURLToPath(new URL(`./${name}.ts`, beside))],
    bundle: true,
    packages: 'external',
    platform: 'node',
    target: 'node20',
    format: 'esm',
    write: false,
  });
  const code = outputFiles[0]?.contents ?? new Uint8Array();
  // Below node_modules, so that the worker finds the packages; named by content, so that no run sees another's code.
  const folder = join(process.cwd(), 'node_modules', '.cache', 'halfsilver');
  const file = join(folder, `${name}-${createHash('sha256').update(code).digest('hex').slice(0, 16)}.mjs`);
  if (existsSync(file)) return file;
  mkdirSync(folder, { recursive: true });
  const half = `${file}.${String(process.pid)}`;
  writeFileSync(half, code);
  renameSync(half, file);
  return file;
}
