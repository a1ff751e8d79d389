import { describe, expect, it } from 'vitest';
import { defaultConvention } from '../optics/convention';
import { KeyEvaluator, type KeyRequest } from './key-task';
import type { Wanted } from './written-key';

const evaluator = new KeyEvaluator();
const evaluate = (expression: string, wanted: Wanted, givens: KeyRequest['givens'] = {}) =>
  evaluator.evaluate({ expression, givens, convention: defaultConvention, wanted });

describe('keys that are states', () => {
  const text = (expression: string) => {
    const { key, fault } = evaluate(expression, { kind: 'state' });
    return key ? key.value : fault.message;
  };

  it.each([
    ['(ket(1, 0) + i*ket(0, 1))/sqrt(2)', '0.7071i |0,1⟩ + 0.7071 |1,0⟩'],
    ['ket(0) - ket(2)', '0.7071 |0⟩ − 0.7071 |2⟩'],
    ['fock(3)', '|3⟩'],
    ['mixture([0.25, 0.75], [vacuum(), fock(1)])', '0.25 |0⟩⟨0| + 0.75 |1⟩⟨1|'],
  ])('writes %s in Dirac notation', (expression, expected) => {
    expect(text(expression)).toBe(expected);
  });

  it('says how much of a long state is not written out', () => {
    expect(text('coherent(2)')).toMatch(/^0\.\d+ \|\d⟩( \+ 0\.\d+ \|\d⟩){5} \+ …$/);
  });

  it('refuses what is no state, in a sentence', () => {
    expect(text('meanPhotons(fock(1))')).toContain('should give a state of light');
  });
});

describe('keys that are formulas', () => {
  const points = [{ t: 0 }, { t: 1 }, { t: 2 }];
  const wanted: Wanted = { kind: 'formula', points, enough: 2 };

  it('have values at the points, as many as are compared; a variable wins over a given', () => {
    const { key } = evaluate('nbar*exp(-t)', wanted, { nbar: 2, t: 100 });
    expect(key).toMatchObject({
      compared: {
        atPoints: [{ re: 2, im: 0 }, { re: 2 / Math.E, im: 0 }, null],
      },
    });
  });

  it('pass over points where they are undefined, and say why where they are nowhere defined', () => {
    const { key } = evaluate('g2(coherent(t))', wanted);
    const one = { re: expect.closeTo(1, 12) as number, im: 0 };
    expect(key).toMatchObject({ compared: { atPoints: [null, one, one] } });
    expect(evaluate('lose(fock(1), 2 + t)', wanted).fault?.message).toContain('transmissivity');
  });
});
