import { describe, expect, it } from 'vitest';
import { judgeLine } from './testing/judge-line';

const variables = { T: [0, 1], nbar: [0.5, 4], n: { integers: [0, 6] } };
const relation = (key: string, text: string, more: Record<string, unknown> = variables) => {
  const checked = judgeLine({ form: 'formula', key, variables: more, tolerance: { relative: 1e-6 } }, text);
  return 'error' in checked ? checked.error : checked.relation;
};

describe('mistakes in a formula', () => {
  it.each([
    ['exp(-nbar*T)', '2exp(-nbar T)', 'twice the key'],
    ['exp(-nbar*T)', '-exp(-nbar T)', 'the key with the other sign'],
    ['exp(-nbar*T)', '1 - exp(-nbar T)', 'one minus the key'],
    ['exp(-nbar*T)', 'exp(-nbar(1-T))', 'the key with 1 − T in place of T'],
    [
      'exp(-nbar*T)/(1+T)',
      'exp(-nbar sqrt(T))/(1+sqrt(T))',
      'the key with √T in place of T, an amplitude for an intensity',
    ],
    ['exp(-nbar*T)', 'exp(nbar T)', 'the reciprocal of the key'],
    ['T + exp(-nbar)', 'T + exp(nbar)', 'the key with −nbar in place of nbar'],
    ['T + exp(-nbar)', 'T + exp(-2nbar)', 'the key with 2nbar in place of nbar'],
    ['T + exp(-nbar)', 'T + exp(-nbar/2)', 'the key with nbar/2 in place of nbar'],
    ['T + exp(-2*pi*nbar)', 'T + exp(-nbar)', 'the key with nbar/2π in place of nbar'],
    ['T - nbar^2', 'nbar - T^2', 'the key with T and nbar exchanged'],
    ['nbar^n/(1+nbar)^(n+1)', 'nbar^(n+1)/(1+nbar)^(n+2)', 'the key with n + 1 in place of n'],
    ['nbar^n/n! + T', 'nbar^(n-1)/(n-1)! + T', 'undefined where the key is not'],
    ['i*nbar', '-i nbar', 'the key with the other sign'],
    ['exp(i*nbar)', 'exp(-i nbar)', 'the complex conjugate of the key'],
    ['exp(-nbar*T)', 'cos(nbar) + T', 'no known relation'],
  ])('a key of %s and %s: %s', (key, text, name) => expect(relation(key, text)).toBe(name));

  it('says where they differ', () => {
    const checked = judgeLine(
      { form: 'formula', key: '2*n', variables: { n: { integers: [3, 3] } }, tolerance: { relative: 1e-6 } },
      'n + 1',
    );
    expect(checked).toMatchObject({ problem: 'At n = 3 the formula is 4 and the key 6.' });
  });
});

describe('what the marker reads of other forms', () => {
  it.each([
    [{ form: 'list', key: '[1, 2]', tolerance: { absolute: 0.1 } }, '1; 3', 'Entry 2 is 3 where the key has 2.'],
    [
      { form: 'matrix', key: '[[1, 0], [0, i]]', tolerance: { absolute: 0.1 } },
      '1, 0; 0, 1',
      'The entry in row 2, column 2 is 1 where the key has i.',
    ],
    [
      { form: 'distribution', key: '[0.5, 0.5]', tolerance: { totalVariation: 0.02 } },
      '0.6; 0.4',
      'The total variation from the key is 0.1; 0.02 is allowed.',
    ],
    [
      { form: 'state', key: 'ket(0) + ket(1)', minimumFidelity: 0.99 },
      '|0>',
      'The fidelity with the key is 0.5; 0.99 is asked for.',
    ],
  ])('%j and %s', (part, text, problem) => expect(judgeLine(part, text)).toMatchObject({ verdict: 'wrong', problem }));
});
