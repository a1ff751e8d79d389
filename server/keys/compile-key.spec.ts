import { describe, expect, it } from 'vitest';
import { compileKey } from './compile-key';
import { evaluateKey, readGivens } from './evaluate-key';
import { KeyError } from './key-error';
import { keySignatures } from './signatures';
import { opticsFunctions } from './optics-functions';
import { plainFunctions } from './plain-functions';
import type { GivenValue } from './value';

function evaluate(expression: string, givens: Record<string, GivenValue> = {}) {
  return evaluateKey(compileKey(expression, { names: Object.keys(givens) }), readGivens(givens));
}

function faultOf(expression: string, givens: Record<string, GivenValue> = {}) {
  try {
    return { value: evaluate(expression, givens) };
  } catch (error) {
    if (error instanceof KeyError) return error.toFault();
    throw error;
  }
}

describe('the key language', () => {
  it.each([
    ['2 + 3*4', 14],
    ['2^3^2', 512],
    ['-2^2', -4],
    ['5!/3!', 20],
    ['[1, 2, 3][2]', 2],
    ['[[1, 2], [3, 4]][2, 1]', 3],
    ['sum([1, 2, 3])', 6],
    ['sum(range(1, 4))', 10],
    ['3 > 2 ? 10 : 20', 10],
    ['0 < 1 < 2 ? 1 : 0', 1],
    ['2 pi', 2 * Math.PI],
    ['combinations(5, 2)', 10],
    ['abs(3 + 4i)', 5],
    ['re(exp(i*pi))', -1],
    ['ln(e)', 1],
  ])('%s = %s', (expression, value) => {
    expect(evaluate(expression).value).toBeCloseTo(value, 12);
  });

  it('keeps complex numbers, and drops an imaginary part that is rounding', () => {
    expect(evaluate('sqrt(-1)*2').value).toEqual({ re: 0, im: 2 });
    expect(evaluate('i*i').value).toBe(-1);
  });

  it.each([
    ['3 MHz', 3e6, 'Hz'],
    ['2 rad/s', 2, 'rad/s'],
    ['5 s^-1', 5, 's^-1'],
    ['2 kg * 3 m/s^2', 6, 'N'],
    ['1 eV', 1.602176634e-19, 'J'],
    ['3 m^2', 3, 'm^2'],
    ['speedOfLight / (500 nm)', 299_792_458 / 500e-9, 's^-1'],
  ])('%s is %s %s', (expression, value, unit) => {
    const result = evaluate(expression);
    expect(result.unit).toBe(unit);
    expect((result.value as number) / value).toBeCloseTo(1, 9);
  });

  it('takes a mean photon number that nobody gave for no billionth of a bar', () => {
    expect(() => evaluate('thermal(nbar)')).toThrow(/“nbar” is no given/);
    expect(evaluate('3 mbar').value).toBe(300);
  });

  it('lets units cancel, and takes givens with units', () => {
    expect(evaluate('kappa*t', { kappa: '20 s^-1', t: '15 ms' })).toMatchObject({ value: 0.3, method: 'algebra' });
  });

  it('lets givens win over functions, units and constants', () => {
    expect(evaluate('gamma*T + g', { gamma: 2, T: 3, g: 4 }).value).toBe(10);
    expect(faultOf('gamma(3)', { gamma: 2 })).toMatchObject({ position: 0, length: 5 });
  });

  it('says by which methods a figure was found, and how well they agree', () => {
    const result = evaluate('photonProbability(coherent(sqrt(nbar)), 3)', { nbar: 4 });
    expect(result.value).toBeCloseTo(0.1953668148131646, 14);
    expect(result.method).toBe('phase space');
    expect(result.second?.method).toBe('number basis');
    expect(result.agreesTo).toBeGreaterThanOrEqual(13);
  });

  it.each([
    ['', /Write an expression/, undefined],
    ['2 +', /end of expression/i, 2],
    ['2 + foo', /“foo” is no given/, 4],
    ['meanphotons(fock(1))', /Did you mean “meanPhotons”/, 0],
    ['lose(fock(2), 1.2)', /`lose`: transmissivity must lie between 0 and 1, got 1\.2 \(at character 15\)/, 14],
    ['meanPhotons(lose(fock(2), 1.2))', /\(at character 27\)/, 26],
    ['1 m + 1 s', /units of both sides do not match/, 0],
    ['g2(vacuum())', /g2/, 0],
    ['coherent(2)', /state of light/, 0],
    ['sqrt', /is a function/, 0],
    ['1/0', /beyond the range/, 0],
    ['0/0', /not a number/, 0],
    ['[1,2][3]', /entries 1 to 2/, 0],
    ['factorial(171)', /at most 170/, 0],
    ['sin("a")', /Texts/, 0],
    ['a', /no given/, 0],
  ])('%s is an error with its place', (expression, message, position) => {
    const fault = faultOf(expression) as { message?: string; position?: number };
    expect(fault.message).toMatch(message);
    expect(fault.position).toBe(position);
  });

  it.each([
    'x = 3',
    'f(x) = x^2',
    '1; 2',
    '1\n2',
    '{a: 1}',
    '{a: 1}.a',
    '[1].constructor',
    '"a".constructor',
    'constructor',
    '__proto__',
    'toString()',
    'hasOwnProperty("a")',
    'evaluate("1")',
    'parse("1")',
    'compile("1")',
    'simplify("x")',
    'derivative("x^2", "x")',
    'createUnit("foo")',
    'import({}, {})',
    'config({})',
    'unit("3 m")',
    'help(sin)',
    'print("a", {})',
    'range(1, 1e9)',
    '1:1000000000',
    'factorial(1e9)',
    '9^9^9^9',
    `${'('.repeat(500)}1${')'.repeat(500)}`,
    `${'-'.repeat(1900)}1`,
    `1${'+1'.repeat(900)}`,
    '1'.repeat(2001),
    'sqrt.constructor("return process")()',
    '[1]["constructor"]',
    'photonDistribution(coherent(2), 1e9)',
    'fock(1e12)',
    'coherent(1e200)',
    'map([1], sin)',
    'f(x)',
    'i = 2',
    "a'",
    '~1',
    '1 | 2',
  ])('%s does not get through', (expression) => {
    expect(faultOf(expression)).toHaveProperty('message');
  });

  it('documents every function, and none besides', () => {
    expect(keySignatures.map((each) => each.name).toSorted()).toEqual(
      [...Object.keys(opticsFunctions), ...Object.keys(plainFunctions)].toSorted(),
    );
  });
});
