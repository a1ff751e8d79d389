import { spawn } from 'node:child_process';

/** @typedef {{ readonly code: number, readonly output: string, readonly seconds: number }} Finished */

/** @type {Set<import('node:child_process').ChildProcess>} */
const running = new Set();
/** @type {NodeJS.Signals | null} */
let stopping = null;

/**
 * Runs a command to its end. Ctrl-C reaches it, and then this program ends too.
 *
 * @param {string} command
 * @param {readonly string[]} parameters
 * @param {{ readonly env?: Readonly<Record<string, string>>, readonly quiet?: boolean }} [options]
 *   `quiet` keeps what it prints instead of printing it
 * @returns {Promise<Finished>} with the exit code, 127 where the command does not exist
 */
export function runCommand(command, parameters, { env = {}, quiet = false } = {}) {
  const began = Date.now();
  return new Promise((resolve) => {
    const child = spawn(command, parameters, {
      stdio: quiet ? ['ignore', 'pipe', 'pipe'] : ['ignore', 'inherit', 'inherit'],
      env: { ...process.env, ...env },
    });
    let output = '';
    child.stdout?.on('data', (chunk) => (output += String(chunk)));
    child.stderr?.on('data', (chunk) => (output += String(chunk)));
    running.add(child);
    /** @param {number} code */
    const finish = (code) => {
      running.delete(child);
      if (stopping) process.exit(stopping === 'SIGINT' ? 130 : 143);
      resolve({ code, output, seconds: (Date.now() - began) / 1000 });
    };
    child.on('error', (error) => {
      output += `${error.message}\n`;
      finish(127);
    });
    child.on('close', (code) => {
      finish(code ?? 1);
    });
  });
}

/** @param {NodeJS.Signals} signal */
function passOn(signal) {
  // A terminal and npm both send the signal: once is enough for the children.
  if (stopping) return;
  stopping = signal;
  if (running.size === 0) process.exit(signal === 'SIGINT' ? 130 : 143);
  for (const child of running) child.kill(signal);
}

/** Makes Ctrl-C end the commands under way, and waits for them. */
export function passSignalsOn() {
  process.on('SIGINT', passOn);
  process.on('SIGTERM', passOn);
}

/** Takes `passSignalsOn` back, for a program that handles signals itself. */
export function leaveSignalsAlone() {
  process.off('SIGINT', passOn);
  process.off('SIGTERM', passOn);
}
