// `npm test`: every gate and every test, from a fresh clone; ends with how many passed and failed.
import { mkdtempSync, readFileSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { buildProgram } from './build-program.mjs';
import { demandNode } from './check-machine.mjs';
import { countPlaywright, countVitest, judgeRunner, totalLine } from './count-results.mjs';
import { installChromium } from './install-chromium.mjs';
import { installPackages } from './install-packages.mjs';
import { splitLint } from './lint-report.mjs';
import { root } from './root.mjs';
import { passSignalsOn, runCommand } from './run-command.mjs';
import { typeChecks } from './type-checks.mjs';

process.chdir(root);
demandNode();
passSignalsOn();
await installPackages();
// Colours are for terminals.
if (!process.stdout.isTTY) process.env['NO_COLOR'] ??= '1';

const reports = mkdtempSync(join(tmpdir(), 'halfsilver-test-'));
process.on('exit', () => {
  rmSync(reports, { recursive: true, force: true });
});

/** @type {{ passed: number, failed: number }[]} */
const results = [];
const bin = (/** @type {string[]} */ ...path) => join(root, 'node_modules', ...path);

/** @param {string} name */
function announce(name) {
  console.log(`\n── ${name}`);
}

/**
 * @param {string} name
 * @param {string} fault empty where there is none
 */
function noteGate(name, fault) {
  results.push({ passed: fault ? 0 : 1, failed: fault ? 1 : 0 });
  console.log(fault ? `${fault}\n${name}: failed` : `${name}: passed`);
}

/**
 * A command that must end well; what it prints is shown only where it does not.
 *
 * @param {readonly string[]} parameters for Node.js
 */
async function faultOf(parameters) {
  const { code, output } = await runCommand(process.execPath, parameters, { quiet: true, env: { NO_COLOR: '1' } });
  return code === 0 ? '' : output.trim() || `It ended with code ${String(code)}.`;
}

/**
 * @param {string} name
 * @param {readonly string[]} parameters for Node.js
 * @param {string} report
 * @param {(report: unknown) => import('./count-results.mjs').Counts} count
 * @param {{ readonly env?: Record<string, string>, readonly after?: string }} [options]
 *   `after`: what is printed before this word is of no interest where the word comes at all
 */
async function runTests(name, parameters, report, count, { env = {}, after } = {}) {
  announce(name);
  const { code, output, seconds } = await runCommand(process.execPath, parameters, { env, quiet: after !== undefined });
  if (after) console.log(output.slice(Math.max(0, output.indexOf(after))).trim());
  const judged = judgeRunner(readReport(report, count), code);
  results.push(judged);
  const parts = [`${String(judged.passed)} passed`, `${String(judged.failed)} failed`];
  if (judged.skipped > 0) parts.push(`${String(judged.skipped)} skipped`);
  if (judged.remark) parts.push(`the runner ${judged.remark}`);
  console.log(`${name}: ${parts.join(', ')} (${String(Math.round(seconds))} s)`);
}

/**
 * @param {string} path
 * @param {(report: unknown) => import('./count-results.mjs').Counts} count
 */
function readReport(path, count) {
  try {
    return count(JSON.parse(readFileSync(path, 'utf8')));
  } catch (error) {
    console.error(`The report cannot be read: ${error instanceof Error ? error.message : String(error)}`);
    return null;
  }
}

// Two of the gates at a time: lint takes as long as the others together.
const lintReport = join(reports, 'lint.json');
const linting = runCommand(
  process.execPath,
  [bin('eslint', 'bin', 'eslint.js'), '.', '--format', 'json', '--output-file', lintReport],
  { quiet: true },
);
const format = await faultOf([bin('prettier', 'bin', 'prettier.cjs'), '--check', '--log-level', 'warn', '.']);
const types = [];
for (const parameters of typeChecks) types.push(await faultOf(parameters));
const cycles = await faultOf([
  bin('dependency-cruiser', 'bin', 'dependency-cruise.mjs'),
  ...['--config', '.dependency-cruiser.mjs', 'src', 'server', 'shared', 'drizzle', 'demo'],
]);
const { output: linted } = await linting;
const found = readLint(lintReport) ?? { others: linted.trim() || 'ESLint left no report.', directions: 'Unknown.' };

noteGate('Lint', found.others);
noteGate('Format', format);
noteGate('Types', types.filter(Boolean).join('\n'));
noteGate('Import directions', [found.directions, cycles].filter(Boolean).join('\n'));

announce('Build');
let built = '';
try {
  await buildProgram();
} catch (error) {
  built = error instanceof Error ? error.message : String(error);
}
noteGate('Build', built);

const clientReport = join(reports, 'client.json');
await runTests(
  'Unit tests of the client',
  [
    bin('@angular', 'cli', 'bin', 'ng.js'),
    ...['test', '--watch=false', '--progress=false'],
    // The file is for the first reporter.
    ...['--reporters=json', '--reporters=default', `--output-file=${clientReport}`],
  ],
  clientReport,
  countVitest,
  // Before its tests it lists the files that it has built.
  { env: { NG_CLI_ANALYTICS: 'false' }, after: ' RUN ' },
);

const serverReport = join(reports, 'server.json');
await runTests(
  'Unit and server tests',
  [bin('vitest', 'vitest.mjs'), 'run', '--reporter=dot', '--reporter=json', `--outputFile.json=${serverReport}`],
  serverReport,
  countVitest,
);

const missing = await installChromium();
if (missing) {
  announce('Browser tests');
  noteGate('Browser tests', missing);
} else {
  const browserReport = join(reports, 'browser.json');
  await runTests('Browser tests', [bin('@playwright', 'test', 'cli.js'), 'test'], browserReport, countPlaywright, {
    env: { PLAYWRIGHT_JSON_OUTPUT_FILE: browserReport },
  });
}

console.log(`\n${totalLine(results)}`);
process.exitCode = results.some(({ failed }) => failed > 0) ? 1 : 0;

/** @param {string} path */
function readLint(path) {
  try {
    return splitLint(JSON.parse(readFileSync(path, 'utf8')), root);
  } catch {
    return null;
  }
}
