import { spawnSync } from 'node:child_process';
import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';

const cases = readFileSync(join(import.meta.dirname, 'reference', 'answers.ndjson'), 'utf8')
  .split('\n')
  .filter((line) => line !== '');

/** Runs the tool as the command line does. */
function runTool(lines: readonly string[]) {
  const { status, stdout } = spawnSync('npm', ['run', '--silent', 'check'], {
    cwd: join(import.meta.dirname, '..', '..'),
    input: `${lines.join('\n')}\n`,
    encoding: 'utf8',
  });
  return { status, answers: stdout.trimEnd().split('\n').map(readJson) };
}

const readJson = (line: string): Readonly<Record<string, unknown>> =>
  JSON.parse(line) as Readonly<Record<string, unknown>>;

describe('the check tool', () => {
  it('gives the verdicts of the 75 given cases, in order, around bad lines', { timeout: 120_000 }, () => {
    const { status, answers } = runTool(['{"part":', '', ...cases, '7']);
    expect(status).toBe(0);
    expect(answers).toHaveLength(cases.length + 3);
    for (const index of [0, 1, cases.length + 2]) expect(answers[index]).toHaveProperty('error');
    for (const [index, line] of cases.entries()) {
      const { part, answer, expect: expected } = readJson(line);
      expect({ part, answer, ...answers[index + 2] }).toMatchObject(Object(expected) as object);
    }
  });
});
