import { createHash } from 'node:crypto';
import { existsSync, readdirSync, readFileSync, statSync } from 'node:fs';
import { join } from 'node:path';

/**
 * The files under some paths, sorted, so that the same tree gives the same list everywhere.
 *
 * @param {string} root
 * @param {readonly string[]} paths files and folders, relative to the root; those that are absent are left out
 * @param {(path: string) => boolean} counts whether a file matters
 * @returns {string[]} relative to the root
 */
export function filesUnder(root, paths, counts) {
  /** @type {string[]} */
  const found = [];
  /** @param {string} path */
  const visit = (path) => {
    const full = join(root, path);
    if (!existsSync(full)) return;
    if (statSync(full).isDirectory()) for (const name of readdirSync(full)) visit(join(path, name));
    else if (counts(path)) found.push(path);
  };
  for (const path of paths) visit(path);
  return [...new Set(found)].sort();
}

/**
 * A hash over the names and contents of files.
 *
 * @param {string} root
 * @param {readonly string[]} files relative to the root
 * @param {string} [also] anything else that the result depends on
 * @returns {string}
 */
export function hashFiles(root, files, also = '') {
  const hash = createHash('sha256').update(also);
  for (const file of files) {
    const content = readFileSync(join(root, file));
    hash.update(`\0${file}\0${String(content.length)}\0`).update(content);
  }
  return hash.digest('hex');
}

/**
 * Whether something must be made again: nothing says what it was made from, or it was made from something else.
 *
 * @param {string} marker the file that keeps the hash of what was used
 * @param {string} hash of what would be used now
 * @returns {boolean}
 */
export function isOutdated(marker, hash) {
  return !existsSync(marker) || readFileSync(marker, 'utf8').trim() !== hash;
}
