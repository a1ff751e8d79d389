import { spawnSync } from 'node:child_process';

/** The oldest Node.js that everything here was run on. */
export const oldestNode = '20.20.0';

/**
 * Says whether a version of Node.js is too old.
 *
 * @param {string} version for example `20.20.2`
 * @param {string} oldest the oldest that will do
 * @returns {boolean}
 */
export function isOlder(version, oldest) {
  const [given, wanted] = [version, oldest].map((text) => text.split('.').map(Number));
  for (let place = 0; place < 3; place++) {
    const difference = (given?.[place] ?? 0) - (wanted?.[place] ?? 0);
    if (difference !== 0) return difference < 0;
  }
  return false;
}

/**
 * What is missing to compile a native package, as the names of what to install.
 *
 * @param {(command: string) => boolean} isThere whether a command can be run
 * @param {NodeJS.Platform} platform
 * @returns {string[]} empty when everything is there
 */
export function missingForCompiling(isThere, platform) {
  // Elsewhere the tools have other names, and npm's own message is better than a guess.
  if (platform !== 'linux' && platform !== 'darwin') return [];
  const missing = [];
  if (!['c++', 'g++', 'clang++'].some(isThere)) missing.push('a C++ compiler');
  if (!isThere('make')) missing.push('make');
  if (!['python3', 'python'].some(isThere)) missing.push('Python 3');
  return missing;
}

/**
 * How to install a compiler and Python on a platform, as one line.
 *
 * @param {NodeJS.Platform} platform
 * @returns {string}
 */
export function howToInstallCompiler(platform) {
  return platform === 'darwin'
    ? 'Install them with: xcode-select --install'
    : 'Install them on Debian or Ubuntu with: sudo apt-get install g++ make python3';
}

/**
 * Whether a command can be run.
 *
 * @param {string} command
 * @returns {boolean}
 */
export function canRun(command) {
  return spawnSync(command, ['--version'], { stdio: 'ignore' }).error === undefined;
}

/** Stops with a sentence when this Node.js is too old to go on. */
export function demandNode() {
  const { node } = process.versions;
  if (isOlder(node, oldestNode)) {
    console.error(`Halfsilver needs Node.js ${oldestNode} or newer in the 20 line; this is ${node}.`);
    console.error('Install it from https://nodejs.org or with your version manager, and start again.');
    process.exit(1);
  }
  if (!node.startsWith('20.')) console.warn(`Halfsilver is tried on Node.js 20; this is ${node}, and it may not work.`);
}
