import { expect, it } from 'vitest';
import { defaultConvention } from '../../optics/convention';
import { KeyEvaluator } from '../key-task';
import { lightExpressions } from './light-expressions';

it('two methods agree on thousands of random figures', () => {
  const evaluator = new KeyEvaluator();
  const wrong: string[] = [];
  let compared = 0;
  for (const expression of lightExpressions(2_026, 3_000)) {
    const { key, fault } = evaluator.evaluate({ expression, givens: {}, convention: defaultConvention });
    // Undefined figures, and conditions of no probability, are the only ones without a value.
    if (fault && !/is not defined|the state vanishes/.test(fault.message))
      wrong.push(`${expression}: ${fault.message}`);
    if (!key || !('agreesTo' in key) || key.agreesTo === undefined) continue;
    compared += 1;
    if (key.agreesTo < 10) wrong.push(`${expression}: agrees to ${String(key.agreesTo)} digits only`);
  }
  expect(wrong).toEqual([]);
  expect(compared).toBeGreaterThan(2_700);
}, 120_000);
