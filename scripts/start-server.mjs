import { spawn } from 'node:child_process';
import { once } from 'node:events';
import { join } from 'node:path';
import { root } from './root.mjs';

/** The last line that the server prints once it can be reached. */
const readyLine = 'Ctrl-C stops it.';

/**
 * A server under another program's hand.
 *
 * @typedef {{
 *   readonly printed: () => string,
 *   readonly ended: Promise<unknown>,
 *   readonly stop: () => Promise<void>,
 *   readonly kill: () => Promise<void>
 * }} RunningServer `stop` lets it finish, `kill` does not
 */

/**
 * Starts the built server and waits until it can be reached.
 *
 * @param {Readonly<Record<string, string>>} env beside what this program's own environment says
 * @param {boolean} [echo] whether its progress is shown while it loads
 * @returns {Promise<RunningServer>}
 * @throws Error with what it printed where it ends before that
 */
export async function startServer(env, echo = false) {
  const child = spawn(process.execPath, ['--enable-source-maps', join(root, 'dist', 'server', 'main.mjs')], {
    cwd: root,
    stdio: ['ignore', 'pipe', 'pipe'],
    env: { ...process.env, ...env },
  });
  let printed = '';
  const ended = once(child, 'exit');
  const endWithUs = () => child.kill('SIGKILL');
  process.once('exit', endWithUs);
  void ended.then(() => process.off('exit', endWithUs));

  await new Promise((resolve, reject) => {
    const hear = (/** @type {Buffer} */ chunk) => {
      printed += String(chunk);
      if (printed.includes(readyLine)) resolve(undefined);
      else if (echo && !printed.includes('Halfsilver is at')) process.stdout.write(chunk);
    };
    child.stdout.on('data', hear);
    child.stderr.on('data', hear);
    void ended.then(() => {
      reject(new Error(`The server did not start.\n${printed.trim()}`));
    });
  });

  /** @param {NodeJS.Signals} signal */
  const end = async (signal) => {
    if (child.exitCode === null && child.signalCode === null) child.kill(signal);
    await ended;
  };
  return { printed: () => printed, ended, stop: () => end('SIGTERM'), kill: () => end('SIGKILL') };
}
