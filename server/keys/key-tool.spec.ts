import { spawnSync } from 'node:child_process';
import { describe, expect, it } from 'vitest';
import { withinTime } from './within-time';

function answers(lines: readonly string[]): unknown[] {
  const { stdout, status } = spawnSync('node', ['scripts/line-tool.mjs', 'server/keys/key-tool.ts'], {
    input: lines.join('\n'),
    encoding: 'utf8',
  });
  expect(status).toBe(0);
  return stdout
    .trim()
    .split('\n')
    .map((line) => JSON.parse(line) as unknown);
}

const runaway = Array.from({ length: 38 }, (_, k) => `entropy(lose(squeeze(cat(3), 1), ${String((k + 1) / 100)}))`);

describe('the line tool', () => {
  it('answers line by line, in order, also after lines that are wrong or run away', () => {
    const given = [
      '{"expression": "photonProbability(coherent(sqrt(nbar)), 3)", "givens": {"nbar": 4}}',
      'no JSON',
      JSON.stringify({ expression: runaway.join(' + ') }),
      '{"expression": "2 * f", "givens": {"f": "3 MHz"}}',
      '{"expression": "fock(2)"}',
      '{"expression": "z^2", "givens": {"z": {"re": 0, "im": 2}}}',
      '{"expression": "quadratureVariance(squeezed(0.5), 0)", "convention": {"vacuumVariance": 0.25, "squeezingSign": -1}}',
    ];
    const found = answers(given);
    expect(found).toHaveLength(given.length);
    // P(3) of a mean of 4, e⁻⁴ 4³/3!.
    expect(found[0]).toMatchObject({ value: expect.closeTo((Math.exp(-4) * 64) / 6, 14) as number });
    expect(found[1]).toEqual({ error: 'This line is not JSON.' });
    expect(found[2]).toMatchObject({ error: expect.stringMatching(/two seconds/) as string });
    expect(found[3]).toMatchObject({ value: 6e6, unit: 'Hz' });
    expect(found[4]).toMatchObject({ error: expect.stringMatching(/state of light/) as string });
    expect(found[5]).toMatchObject({ value: -4 });
    expect(found[6]).toMatchObject({ value: expect.closeTo(Math.exp(1) / 4, 13) as number });
  }, 60_000);
});

describe('withinTime', () => {
  it('says whether an act came to its end, and hands on what it throws', () => {
    let done = 0;
    expect(withinTime(1_000, () => (done += 1))).toBe(true);
    expect(done).toBe(1);
    expect(
      withinTime(50, () => {
        for (;;) done += 1;
      }),
    ).toBe(false);
    expect(() =>
      withinTime(1_000, () => {
        throw new RangeError('handed on');
      }),
    ).toThrow('handed on');
  });
});
