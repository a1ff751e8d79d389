import { afterAll, expect, it } from 'vitest';
import { defaultConvention } from '../../optics/convention';
import { createKeyPool } from '../key-pool';
import { fuzzExpressions } from './fuzz-expressions';
import { objectionTo } from './judge-outcome';

const pool = createKeyPool({ size: 2 });
afterAll(() => pool.close());

it('ten thousand random expressions end in finite values or sentences', async () => {
  const givens = { nbar: 2.5, eta: 0.6, alpha: { re: 1, im: 0.5 } };
  const expressions = [...fuzzExpressions(20_261, 10_000)];
  const outcomes = await pool.evaluateMany(
    expressions.map((expression) => ({ expression, givens, convention: defaultConvention })),
  );
  const wrong = outcomes.flatMap((outcome, index) => {
    const objection = objectionTo(outcome);
    return objection ? [`${expressions[index] ?? ''}: ${objection}`] : [];
  });
  expect(wrong).toEqual([]);
}, 300_000);
