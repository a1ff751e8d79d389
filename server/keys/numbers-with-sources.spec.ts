import { describe, expect, it } from 'vitest';
import { compileKey } from './compile-key';
import { evaluateKey, readGivens } from './evaluate-key';
import type { GivenValue } from './value';

function evaluate(expression: string, givens: Record<string, GivenValue> = {}) {
  return evaluateKey(compileKey(expression, { names: Object.keys(givens) }), readGivens(givens));
}

/** Two-sided: both relative to the published value. */
function expectClose(found: unknown, published: number, relative: number): void {
  expect(Math.abs(Number(found) - published)).toBeLessThanOrEqual(relative * Math.abs(published));
}

describe('physical constants', () => {
  // CODATA recommended values of 2022 (physics.nist.gov/cuu/Constants; Rev. Mod. Phys. 97, 025002): the digits printed.
  it.each([
    ['speedOfLight', 299_792_458, 'm s^-1'],
    ['planckConstant', 6.626_070_15e-34, 'kg m^2 s^-1'],
    ['reducedPlanckConstant', 1.054_571_817e-34, 'kg m^2 s^-1'],
    ['boltzmann', 1.380_649e-23, 'kg m^2 s^-2 K^-1'],
    ['elementaryCharge', 1.602_176_634e-19, 'C'],
    ['electricConstant', 8.854_187_818_8e-12, 'kg^-1 m^-3 s^4 A^2'],
    ['electronMass', 9.109_383_713_9e-31, 'kg'],
    ['bohrRadius', 5.291_772_105_44e-11, 'm'],
  ])('%s is %s %s', (name, published, unit) => {
    const { value, unit: found } = evaluate(name);
    expect(found).toBe(unit);
    expectClose(value, published, 7e-10);
  });

  it('has the electronvolt of 2019, which is exact', () => {
    expect(evaluate('1 eV').value).toBe(1.602_176_634e-19);
  });
});

describe('figures with units', () => {
  const h = 6.626_070_15e-34;
  const k = 1.380_649e-23;
  const c = 299_792_458;

  it.each([
    ['thermalOccupation(5 GHz, 20 mK)', {}, 1 / Math.expm1((h * 5e9) / (k * 0.02)), undefined],
    ['thermalOccupation(f, T)', { f: '5 GHz', T: '0.02 K' }, 1 / Math.expm1((h * 5e9) / (k * 0.02)), undefined],
    ['thermalOccupation(2*pi*5e9 rad/s, 20 mK)', {}, 1 / Math.expm1((h * 5e9) / (k * 0.02)), undefined],
    ['thermalOccupation(1 kHz, 300 K)', {}, 1 / Math.expm1((h * 1e3) / (k * 300)), undefined],
    ['thermalOccupation(5 GHz, 0 K)', {}, 0, undefined],
    ['photonEnergy(532 nm)', {}, (h * c) / 532e-9, 'J'],
    ['photonEnergy(600 THz)', {}, h * 6e14, 'J'],
    ['photonEnergy(w)', { w: '3e15 rad/s' }, (h * 3e15) / (2 * Math.PI), 'J'],
    ['photonFlux(1 mW, 633 nm)', {}, (1e-3 * 633e-9) / (h * c), 's^-1'],
    ['photonEnergy(1550 nm) / (1 eV)', {}, (h * c) / 1550e-9 / 1.602_176_634e-19, undefined],
    ['2 * f', { f: '3 MHz' }, 6e6, 'Hz'],
    ['kappa * t', { kappa: '2 us^-1', t: '3 us' }, 6, undefined],
    ['3 MHz to kHz', {}, 3e6, 'Hz'],
    ['boltzmann * 300 K to eV', {}, k * 300, 'J'],
  ] as const)('%s', (expression, givens, value, unit) => {
    const found = evaluate(expression, givens);
    expect(found.unit).toBe(unit);
    expectClose(found.value, value, 1e-13);
  });

  it('gives the rate of the 2p–1s transition of hydrogen', () => {
    // A = 6.2649e8 s^-1, NIST Atomic Spectra Database. Along one axis the dipole of 2p–1s is e a 2^(15/2)/3^5, a the
    // Bohr radius for the reduced mass (Bethe and Salpeter); wavenumber 82 259.163 cm^-1, the mean of both 2p levels.
    // What is left, 4e-5, is of the order of the square of the fine-structure constant.
    const { value, unit } = evaluate(
      'spontaneousRate(2*pi rad*speedOfLight*8225916.3 m^-1, elementaryCharge*bohrRadius*(1 + 1/1836.152673)*2^7.5/3^5)',
    );
    expect(unit).toBe('s^-1');
    expectClose(value, 6.2649e8, 1e-4);
  });

  it.each([
    ['spontaneousRate(2.5e15 Hz, 1e-29 C m)', /rad\/s, got Hz/],
    ['photonEnergy(500)', /must have a unit/],
    ['thermalOccupation(5 GHz, -1 K)', /must not be negative/],
    ['photonFlux(1 mW, 600 THz)', /such as nm/],
    ['3 MHz + 2', /`\+` needs the same units on both sides/],
    ['2 MHz + 1 rad/s', /units of both sides do not match/],
    ['3 MHz to m', /units of both sides do not match/],
    ['3 to m', /between a quantity and a unit/],
    ['[1 MHz, 2 MHz]', /must be pure numbers/],
  ])('%s is refused', (expression, sentence) => {
    expect(() => evaluate(expression)).toThrow(sentence);
  });
});

describe('special functions', () => {
  // The functions of the DLMF (10.2, 10.25, 18.3, 7.2, 5.2), worked out to 25 digits with mpmath. M. Abramowitz and
  // I. A. Stegun, Handbook of Mathematical Functions (1964), prints the first ten or so of the Bessel functions.
  it.each([
    ['besselJ(0, 1)', 0.7651976865579666],
    ['besselJ(1, 1)', 0.4400505857449335],
    ['besselJ(0, 10)', -0.24593576445134835],
    ['besselJ(1, 10)', 0.04347274616886144],
    ['besselJ(2, 5)', 0.04656511627775222],
    ['besselJ(20, 10)', 1.1513369247813398e-5],
    ['besselJ(100, 50)', 1.1159273690838094e-21],
    ['besselJ(-1, 1)', -0.4400505857449335],
    ['besselI(0, 1)', 1.2660658777520084],
    ['besselI(1, 1)', 0.565159103992485],
    ['besselI(0, 10)', 2815.7166284662544],
    ['besselI(5, 10)', 777.18828640326],
    ['besselI(3, 0.1)', 2.0846357422327155e-5],
    ['laguerre(5, 0, 0.5)', -0.44557291666666665],
    ['laguerre(10, 0, 1)', 0.41894593253968254],
    ['laguerre(10, 0, 5)', 1.7562761794532629],
    ['laguerre(4, 2, 3)', -1.125],
    ['hermite(5, 0.5)', 41],
    ['hermite(10, 1)', 8224],
    ['hermite(12, 3)', 5517504],
    ['erf(0.5)', 0.5204998778130465],
    ['erf(2)', 0.9953222650189527],
    ['gamma(1/3)', 2.678938534707748],
    ['gamma(1/2)', Math.sqrt(Math.PI)],
  ])('%s', (expression, published) => {
    expectClose(evaluate(expression).value, published, 1e-13);
  });

  // The Poisson distribution, Abramowitz and Stegun, table 26.7 (as 1 − P of chi-square with 2c degrees of freedom).
  it.each([
    ['sum(photonDistribution(coherent(2), 3))', 0.433_47],
    ['sum(photonDistribution(coherent(sqrt(10)), 5))', 0.067_09],
    ['sum(photonDistribution(coherent(sqrt(10)), 10))', 0.583_04],
  ])('%s', (expression, published) => {
    expect(Math.abs(Number(evaluate(expression).value) - published)).toBeLessThanOrEqual(5e-6);
  });
});

describe('plain functions', () => {
  it.each([
    ['combinations(500, 250)', 1.167_443_157_882_776_8e149],
    ['combinations(1029, 514)', 1.429_820_686_498_904e308],
    ['combinations(60, 30)', 118264581564861424],
    ['combinations(1e6, 2)', 499_999_500_000],
    ['combinations(7, 0)', 1],
    ['factorial(170)', 7.257_415_615_307_999e306],
    ['log(8, 2)', 3],
    ['hypot(3, 4)', 5],
    ['mod(7, 3)', 1],
    ['atan2(1, -1)', (3 * Math.PI) / 4],
    ['round(pi, 3)', 3.142],
    ['mean([1, 2, 6])', 3],
    ['sum(range(0, 1, 0.25))', 2.5],
    ['photonDistribution(coherent(1), 5)[3]', Math.exp(-1) / 2],
    ['densityMatrix(fock(1), 2)[2, 2]', 1],
  ])('%s', (expression, value) => {
    expectClose(evaluate(expression).value, value, 5e-15);
  });

  it.each([
    ['combinations(2000, 1000)', /beyond the range of numbers/],
    ['combinations(3, 5)', /0 ≤ k ≤ n/],
    ['factorial(171)', /at most 170/],
    ['factorial(2.5)', /whole number/],
    ['[1, 2][0]', /no entry 0/],
    ['besselI(0, 800)', /larger than a number can hold/],
    ['2 + 3 > 4', /truth value/],
  ])('%s is refused', (expression, sentence) => {
    expect(() => evaluate(expression)).toThrow(sentence);
  });

  it.each(['i', 'e', 'pi'])('no given can be named %s', (name) => {
    expect(() => evaluate('1', { [name]: 2 })).toThrow(/constant of the language/);
  });
});
