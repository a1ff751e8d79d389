import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { evaluateExpression } from '../../testing/evaluate-expression';

interface Row {
  readonly expression: string;
  readonly expected: number;
  readonly absolute: number;
  readonly dimension: number;
}

const rows = readFileSync(new URL('./values.ndjson', import.meta.url), 'utf8')
  .trim()
  .split('\n')
  .map((line) => JSON.parse(line) as Row);

// make-values.py says how the values were made; each line states the truncation error of QuTiP's own basis.
describe('random keys beside QuTiP', () => {
  it('has a few hundred of them', () => {
    expect(rows.length).toBeGreaterThanOrEqual(200);
  });

  it.each(rows)('$expression', ({ expression, expected, absolute }) => {
    const { value } = evaluateExpression(expression);
    expect(Math.abs(Number(value) - expected)).toBeLessThanOrEqual(absolute);
  });
});
