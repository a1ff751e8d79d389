import { readFile, writeFile } from 'node:fs/promises';
import { join } from 'node:path';
import { promisify } from 'node:util';
import { brotliCompress, constants, gzip } from 'node:zlib';
import { filesUnder } from './hash-inputs.mjs';

/** Below this many bytes a second file saves nothing. */
const worthwhile = 1024;

/**
 * Whether a file of the client is served compressed. index.html is not: it is filled in for each request. Fonts of the
 * web and pictures are compressed already.
 *
 * @param {string} path
 * @returns {boolean}
 */
export function isCompressible(path) {
  return /\.(js|mjs|css|svg|json|txt|webmanifest|wasm)$/.test(path);
}

/**
 * Puts a Brotli and a gzip form beside each file of a folder that is worth it.
 *
 * @param {string} folder
 */
export async function precompress(folder) {
  const files = filesUnder(folder, ['.'], isCompressible);
  await Promise.all(
    files.map(async (file) => {
      const path = join(folder, file);
      const content = await readFile(path);
      if (content.length < worthwhile) return;
      const [brotli, gzipped] = await Promise.all([
        promisify(brotliCompress)(content, {
          params: {
            [constants.BROTLI_PARAM_QUALITY]: constants.BROTLI_MAX_QUALITY,
            [constants.BROTLI_PARAM_SIZE_HINT]: content.length,
          },
        }),
        promisify(gzip)(content, { level: constants.Z_BEST_COMPRESSION }),
      ]);
      await Promise.all([writeFile(`${path}.br`, brotli), writeFile(`${path}.gz`, gzipped)]);
    }),
  );
}
