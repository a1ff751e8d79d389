import { afterAll, describe, expect, it } from 'vitest';
import { defaultConvention } from '../optics/convention';
import { createKeyPool } from './key-pool';

const pool = createKeyPool({ size: 2 });
const convention = defaultConvention;

/** A key that the limits on its parts let through, and that keeps a worker busy for much longer than two seconds. */
const sums = Array.from({ length: 38 }, (_, k) => `entropy(lose(squeeze(cat(3), 1), ${String((k + 1) / 100)}))`);
const runaway = sums.join(' + ');

afterAll(() => pool.close());

describe('a key that runs away', () => {
  it('is stopped after two seconds, and others are served meanwhile', async () => {
    // As many batches as it takes for both workers to have started.
    await pool.evaluateMany(Array.from({ length: 500 }, () => ({ expression: '1', givens: {}, convention })));
    const began = Date.now();
    const run = { isOver: false };
    const stopped = pool.evaluateMany([{ expression: runaway, givens: {}, convention }]).then((outcomes) => {
      run.isOver = true;
      return outcomes;
    });
    let served = 0;
    while (!run.isOver && Date.now() - began < 20_000) {
      const [outcome] = await pool.evaluateMany([
        { expression: 'meanPhotons(thermal(n))', givens: { n: 3 }, convention },
      ]);
      expect(outcome?.key?.value).toBeCloseTo(3, 12);
      served += 1;
    }
    const [outcome] = await stopped;
    expect(outcome?.fault?.message).toMatch(/longer than two seconds/);
    expect(served).toBeGreaterThan(1);
  }, 60_000);
});
