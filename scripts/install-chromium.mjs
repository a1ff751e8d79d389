import { existsSync } from 'node:fs';
import { canRun } from './check-machine.mjs';
import { runCommand } from './run-command.mjs';

/** Where Debian's package puts it. */
const debianChromium = '/usr/bin/chromium';

/** The Chromium that browser tests use: `CHROMIUM_PATH` where it is set. */
export const chromiumPath = process.env['CHROMIUM_PATH'] || debianChromium;

/**
 * Installs Chromium from Debian's packages where it is absent.
 *
 * @returns {Promise<string>} empty, or what a person has to do
 */
export async function installChromium() {
  if (existsSync(chromiumPath)) return '';
  if (process.env['CHROMIUM_PATH']) return `CHROMIUM_PATH is ${chromiumPath}, and there is nothing there.`;
  const byHand =
    'Install Chromium (on Debian: sudo apt-get install chromium), or set CHROMIUM_PATH to a Chromium or Chrome that is there, and run npm test again.';
  if (!canRun('apt-get')) return `The browser tests need Chromium, and this machine has no apt-get. ${byHand}`;
  if (process.getuid?.() !== 0) return `The browser tests need Chromium, and only root can install it. ${byHand}`;
  console.log('Installing Chromium for the browser tests, from Debian’s packages …');
  const apt = (/** @type {string[]} */ ...parameters) =>
    runCommand('apt-get', ['-o', 'DPkg::Lock::Timeout=600', '-q', ...parameters], {
      env: { DEBIAN_FRONTEND: 'noninteractive' },
      quiet: true,
    });
  let ended = await apt('update');
  if (ended.code === 0) ended = await apt('install', '-y', '--no-install-recommends', 'chromium');
  if (ended.code === 0 && existsSync(chromiumPath)) return '';
  return `Chromium could not be installed.\n${ended.output.trim().split('\n').slice(-10).join('\n')}\n${byHand}`;
}
