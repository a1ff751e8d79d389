import { existsSync, readFileSync, readdirSync, rmSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { canRun, howToInstallCompiler, missingForCompiling } from './check-machine.mjs';
import { hashFiles, isOutdated } from './hash-inputs.mjs';
import { root } from './root.mjs';
import { runCommand } from './run-command.mjs';

const marker = join(root, 'node_modules', '.halfsilver-installed');
/** Holds the process that is installing: two at once would empty each other's folder. */
const lock = join(root, '.installing');

// Native packages are compiled for one line of Node.js: another one needs them anew.
const hash = () => hashFiles(root, ['package-lock.json'], process.versions.modules);

/** Remembers what the packages that are there were installed from. npm calls it after each install. */
export function rememberInstall() {
  writeFileSync(marker, hash());
}

/** Installs the packages where they are missing or another lockfile's; says so while it takes its time. */
export async function installPackages() {
  if (isOutdated(marker, hash())) {
    await takeLock();
    try {
      // Another command may have done it meanwhile.
      if (isOutdated(marker, hash())) await install();
    } finally {
      rmSync(lock, { force: true });
    }
  }
}

/** Waits until no other command is installing. */
async function takeLock() {
  for (let said = false; ; said = true) {
    try {
      writeFileSync(lock, String(process.pid), { flag: 'wx' });
      // A command that ends while it installs leaves no lock behind.
      process.once('exit', () => {
        rmSync(lock, { force: true });
      });
      return;
    } catch (error) {
      if (/** @type {NodeJS.ErrnoException} */ (error).code !== 'EEXIST') throw error;
    }
    if (!isRunning(Number(readLock()))) rmSync(lock, { force: true });
    else {
      if (!said) console.log('Another command is installing the packages; waiting for it …');
      await new Promise((resolve) => setTimeout(resolve, 1_000));
    }
  }
}

function readLock() {
  try {
    return readFileSync(lock, 'utf8');
  } catch {
    return '';
  }
}

/** @param {number} pid */
function isRunning(pid) {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (error) {
    // A process of somebody else's may not be asked.
    return /** @type {NodeJS.ErrnoException} */ (error).code === 'EPERM';
  }
}

async function install() {
  const missing = missingForCompiling(canRun, process.platform);
  console.log('Installing packages. This happens once and takes two to four minutes.');
  if (missing.length > 0) {
    console.log(`better-sqlite3 may have to be compiled, and this machine lacks ${missing.join(' and ')}.`);
    console.log(`${howToInstallCompiler(process.platform)}\nTrying without …`);
  }

  const began = Date.now();
  let saidCompiling = false;
  const news = setInterval(() => {
    const seconds = Math.round((Date.now() - began) / 1000);
    if (isCompiling()) {
      console.log(
        saidCompiling
          ? `  still compiling (${String(seconds)} s)`
          : `  compiling better-sqlite3, the database: about two minutes (${String(seconds)} s)`,
      );
      saidCompiling = true;
    } else console.log(`  installing (${String(seconds)} s)`);
  }, 20_000);
  const { code, output } = await runCommand(
    process.platform === 'win32' ? 'npm.cmd' : 'npm',
    ['ci', '--include=dev', '--no-audit', '--no-fund', '--no-progress', '--loglevel=error'],
    // Chromium comes from the system's packages, and only for the tests.
    { env: { PLAYWRIGHT_SKIP_BROWSER_DOWNLOAD: '1' }, quiet: true },
  );
  clearInterval(news);

  if (code !== 0) {
    console.error(output.trim().split('\n').slice(-40).join('\n'));
    console.error('\nThe packages could not be installed.');
    if (missing.length > 0)
      console.error(`${missing.join(' and ')}: missing. ${howToInstallCompiler(process.platform)}`);
    else console.error('Look at the lines above; where the network was at fault, start again.');
    process.exit(1);
  }
  rememberInstall();
  console.log(`Packages installed (${String(Math.round((Date.now() - began) / 1000))} s).`);
}

function isCompiling() {
  const build = join(root, 'node_modules', 'better-sqlite3', 'build');
  if (!existsSync(build)) return false;
  const release = join(build, 'Release');
  return !existsSync(release) || !readdirSync(release).includes('better_sqlite3.node');
}
