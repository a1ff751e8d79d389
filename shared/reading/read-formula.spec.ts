import { renderToString } from 'katex';
import { describe, expect, it } from 'vitest';
import { real } from './complex';
import { evaluateNumber } from './quantity';
import { readAnswer } from './read-answer';
import type { FieldVariable } from './reading';

const read = (text: string, ...variables: readonly (string | FieldVariable)[]) =>
  readAnswer(text, {
    form: 'formula',
    variables: variables.map((each) => (typeof each === 'string' ? { name: each } : each)),
  });

/** The value with every variable replaced. */
function value(text: string, scope: Readonly<Record<string, number>>): number {
  const reading = read(text, ...Object.keys(scope));
  if (reading.kind !== 'formula') throw new Error(`${text}: ${JSON.stringify(reading)}`);
  return evaluateNumber(reading.expression, new Map(Object.entries(scope).map(([name, each]) => [name, real(each)])))
    .re;
}

describe('reading a formula', () => {
  const scope = { nbar: 2.5, n: 3, kappa: 0.4, omega: 1.7, alpha: 1.2, t: 0.9, G: 5, T_1: 0.3, gamma: 0.8 };
  const { nbar, n, kappa, omega, alpha, t, G, T_1, gamma } = scope;

  it.each([
    ['e^(-nbar) nbar^n / n!', (Math.exp(-nbar) * nbar ** n) / 6],
    ['e^{-n̄} n̄^n/n!', (Math.exp(-nbar) * nbar ** n) / 6],
    ['\\frac{\\bar{n}^n}{n!} e^{-\\bar n}', (Math.exp(-nbar) * nbar ** n) / 6],
    ['P(n) = exp(-nbar) nbar^n/n!', (Math.exp(-nbar) * nbar ** n) / 6],
    ['G(G-1)', G * (G - 1)],
    ['(G-1)G', G * (G - 1)],
    ['G/(G+2(G-1))', G / (3 * G - 2)],
    ['1/2G', G / 2],
    ['1/G G', 1 / (G * G)],
    ['α e^{-κ t/2} cos(ωt)', alpha * Math.exp((-kappa * t) / 2) * Math.cos(omega * t)],
    ['αe^{-κt/2}cos(ωt)', alpha * Math.exp((-kappa * t) / 2) * Math.cos(omega * t)],
    ['\\alpha e^{-\\kappa t/2}\\cos(\\omega t)', alpha * Math.exp((-kappa * t) / 2) * Math.cos(omega * t)],
    ['e^-κ t', Math.exp(-kappa) * t],
    ['sin²(ωt)', Math.sin(omega * t) ** 2],
    ['\\sin^2(\\omega t)', Math.sin(omega * t) ** 2],
    ['|α|^2', alpha ** 2],
    ['exp(-gamma t)', Math.exp(-gamma * t)],
    ['gamma(3)', 3 * gamma],
    ['γt', gamma * t],
    ['T_1', T_1],
    ['T1', T_1],
    ['T₁', T_1],
    ['T_{1}', T_1],
    ['2^-t^2', 2 ** -(t ** 2)],
    ['-t^2', -(t ** 2)],
    ['√(G)/2', Math.sqrt(G) / 2],
    ['G·10^-3', G * 1e-3],
    ['G x 10^-3', NaN],
  ])('reads %s', (text, expected) => {
    if (Number.isNaN(expected)) expect(read(text, ...Object.keys(scope)).kind).toBe('unreadable');
    else expect(value(text, scope)).toBeCloseTo(expected, 13);
  });

  it('reads the gamma function where no variable is called so', () => {
    expect(value('gamma(t)', { t: 5 })).toBe(24);
    expect(value('t!', { t: 0.5 })).toBeCloseTo(Math.sqrt(Math.PI) / 2, 13);
  });

  it('takes other spellings of a variable', () => {
    const reading = read('eta V', { name: 'efficiency', spellings: ['η', '\\eta'] }, 'V');
    expect(reading).toMatchObject({ kind: 'formula', readAs: 'efficiency V' });
  });

  it('suggests a product for names that run together', () => {
    expect(read('kappat', 'kappa', 't')).toEqual({
      kind: 'unreadable',
      problem: 'The name “kappat” is not known here; for a product write “kappa t”.',
      at: 1,
    });
  });

  it.each([
    ['x', '“x” is not a name that is known here.'],
    ['3 MHz', '“MHz” is not a name that is known here.'],
    ['1/0', 'The answer is not finite.'],
    ['ln G', 'Write “ln” with brackets, as in ln(2).'],
    ['\\foo G', 'The command “\\foo” is not known here.'],
    ['\\ket{0}', 'A ket has no place in this field.'],
  ])('says what is wrong with %s', (text, problem) =>
    expect(read(text, 'G')).toMatchObject({ kind: 'unreadable', problem }),
  );

  it('shows how it was taken', () => {
    expect(read('1/2G', 'G')).toMatchObject({ readAs: '(1/2) G', typeset: '\\frac{1}{2}\\,{G}' });
    expect(read('G/2(G-1)', 'G')).toMatchObject({ typeset: '\\frac{{G}}{2\\,\\left({G} - 1\\right)}' });
    expect(read('nbar', { name: 'nbar', symbol: '\\langle n\\rangle' })).toMatchObject({
      typeset: '{\\langle n\\rangle}',
    });
  });

  it('is typeset without complaint', () => {
    const variables = Object.keys(scope);
    for (const text of [
      'α e^{-(κ/2 + i ω) t}',
      '(-2)^t',
      'T_1!',
      'acosh(G)+log10(G)',
      '|α|^2^t',
      '50% G',
      'n̄^n/n!',
      'conj(alpha)',
    ]) {
      const reading = read(text, ...variables);
      if (reading.kind !== 'formula') throw new Error(text);
      expect(() => renderToString(reading.typeset, { throwOnError: true, strict: 'error' })).not.toThrow();
    }
  });
});
