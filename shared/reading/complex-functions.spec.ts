import { describe, expect, it } from 'vitest';
import { add, divide, exp, ln, modulus, multiply, power, real, sqrt, subtract, type Complex } from './complex';
import { answerFunctions, gamma } from './complex-functions';

const of = (name: string, a: Complex): Complex => {
  const apply = answerFunctions.get(name);
  if (!apply) throw new Error(name);
  return apply(a);
};
const distance = (a: Complex, b: Complex) => modulus(subtract(a, b)) / Math.max(1, modulus(b));

const samples: readonly Complex[] = [
  { re: 0.3, im: 0.7 },
  { re: -1.2, im: 0.4 },
  { re: 0.5, im: -2.1 },
  { re: -0.8, im: -0.6 },
  { re: 1.9, im: 0 },
];

describe('complex functions', () => {
  it.each([
    ['asin', 'sin'],
    ['acos', 'cos'],
    ['atan', 'tan'],
    ['asinh', 'sinh'],
    ['acosh', 'cosh'],
    ['atanh', 'tanh'],
  ])('%s inverts %s', (inverse, direct) => {
    for (const z of samples) expect(distance(of(direct, of(inverse, z)), z)).toBeLessThan(1e-13);
  });

  it('keeps the laws of exponentials, roots and powers', () => {
    for (const z of samples) {
      expect(distance(exp(ln(z)), z)).toBeLessThan(1e-14);
      expect(distance(multiply(sqrt(z), sqrt(z)), z)).toBeLessThan(1e-14);
      expect(distance(power(z, real(3)), multiply(z, multiply(z, z)))).toBeLessThan(1e-14);
      expect(distance(power(z, real(-1)), divide(real(1), z))).toBeLessThan(1e-14);
      const [s, c] = [of('sin', z), of('cos', z)];
      expect(distance(add(multiply(s, s), multiply(c, c)), real(1))).toBeLessThan(1e-13);
    }
  });

  it('has a gamma function that gives factorials and obeys its recurrence', () => {
    expect(gamma(real(6)).re).toBe(120);
    expect(gamma(real(0.5)).re).toBeCloseTo(Math.sqrt(Math.PI), 13);
    for (const z of samples) expect(distance(gamma(add(z, real(1))), multiply(z, gamma(z)))).toBeLessThan(1e-12);
    expect(gamma(real(0)).re).toBeNaN();
    expect(gamma(real(170.6)).re).toBeGreaterThan(1e300);
  });
});
