import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { defaultConvention, type Convention } from '../optics/convention';
import { compileKey } from './compile-key';
import { evaluateKey, readGivens } from './evaluate-key';
import type { GivenValue, PlainValue } from './value';

interface CheckValue {
  readonly group: string;
  readonly expression: string;
  readonly givens: Readonly<Record<string, GivenValue>>;
  readonly expected: PlainValue;
  readonly relative?: number;
  readonly absolute?: number;
  readonly unit?: string;
  readonly convention?: Partial<Convention>;
  readonly source: string;
}

const file = new URL('../optics/reference/optics-check-values.ndjson', import.meta.url);
const rows = readFileSync(file, 'utf8')
  .trim()
  .split('\n')
  .map((line) => JSON.parse(line) as CheckValue);

/** Complex numbers of a value, one after the other. */
function entries(value: PlainValue): { re: number; im: number }[] {
  if (typeof value === 'number') return [{ re: value, im: 0 }];
  return 're' in value ? [value] : value.flatMap(entries);
}

describe('check values', () => {
  it.each(rows.map((row) => [row.group, row.expression, row] as const))('%s: %s', (_group, expression, row) => {
    const convention = { ...defaultConvention, ...row.convention };
    const compiled = compileKey(expression, { names: Object.keys(row.givens), convention });
    const result = evaluateKey(compiled, readGivens(row.givens));
    const found = entries(result.value);
    const expected = entries(row.expected);
    expect(found).toHaveLength(expected.length);
    for (const [index, each] of expected.entries()) {
      const error = Math.hypot((found[index]?.re ?? NaN) - each.re, (found[index]?.im ?? NaN) - each.im);
      const allowed = Math.max((row.relative ?? 0) * Math.hypot(each.re, each.im), row.absolute ?? 0);
      expect(error).toBeLessThanOrEqual(allowed);
    }
    if (row.unit) expect(result.unit).toBe(row.unit);
  });
});
