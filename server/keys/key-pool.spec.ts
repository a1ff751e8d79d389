import { afterAll, describe, expect, it } from 'vitest';
import { defaultConvention } from '../optics/convention';
import { createKeyPool } from './key-pool';

const pool = createKeyPool({ size: 2 });
const convention = defaultConvention;

afterAll(() => pool.close());

describe('the pool of keys', () => {
  it('answers in order, errors included', async () => {
    const outcomes = await pool.evaluateMany([
      { expression: 'meanPhotons(thermal(nbar))', givens: { nbar: 3 }, convention },
      { expression: '2 +', givens: {}, convention },
      ...Array.from({ length: 200 }, (_, n) => ({ expression: 'n^2', givens: { n }, convention })),
    ]);
    expect(outcomes[0]?.key?.value).toBeCloseTo(3, 12);
    expect(outcomes[1]?.fault?.position).toBe(2);
    expect(outcomes[201]?.key?.value).toBe(199 ** 2);
  });

  it('works under the convention that is asked for', async () => {
    const expression = 'quadratureVariance(vacuum(), 0)';
    const outcomes = await pool.evaluateMany([
      { expression, givens: {}, convention },
      { expression, givens: {}, convention: { ...convention, vacuumVariance: 1 } },
    ]);
    const [half, one] = outcomes.map((outcome) => outcome.key?.value);
    expect(half).toBeCloseTo(0.5, 12);
    expect(one).toBeCloseTo(1, 12);
  });
});
