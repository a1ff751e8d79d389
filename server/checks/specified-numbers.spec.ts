import { describe, expect, it } from 'vitest';
import { judgeLine, numberWith, verdictOf } from './testing/judge-line';

const right = 'right 1';
const wrong = 'wrong 0';
const unreadable = 'unreadable 0';

describe('numbers as people write them, key 0.0498', () => {
  it.each([
    '0.0498',
    '.0498',
    '0,0498',
    ',0498',
    '4.98e-2',
    '4.98E-2',
    '4,98e-2',
    '4.98e−2',
    '4.98×10^-2',
    '4.98 × 10^−2',
    '4.98x10^-2',
    '4.98 x 10^-2',
    '4.98 X 10^-2',
    '4.98 x 10^{-2}',
    '4.98*10^-2',
    '4.98*10**-2',
    '4.98·10⁻²',
    '4.98⋅10^(-2)',
    '4,98·10⁻²',
    '4.98 \\times 10^{-2}',
    '4.98 \\cdot 10^{-2}',
    '498e-4',
    '+0.0498',
    ' 0.0498 ',
    '0.0498\n',
    '0.049\u20098',
    '0.049 800',
    '4.98%',
    '4.98 %',
    '4.98\\%',
    'P = 0.0498',
    'P=0,0498',
    'p(3) = 0.0498',
    'P(n = 3) = 0.0498',
    'P(n=3) ≈ 0,0498',
    'g⁽²⁾(0) = 0.0498',
    '⟨n⟩ = 0.0498',
    'P_3 ≈ 0.0498',
    '|c_2|^2 = 0.0498',
    '= 0.0498',
    '≈ 0.0498',
    '~0.0498',
    '$0.0498$',
    '(0.0498)',
    '0.0498 + 0i',
    '249/5000',
    '0.0249*2',
    '−(−0.0498)',
  ])('%s is right', (text) => expect(verdictOf(numberWith('0.0498'), text)).toBe(right));

  it.each(['-0.0498', '−0.0498', '0.498', '498', '0', '5e-2 - 1'])('%s is wrong', (text) =>
    expect(verdictOf(numberWith('0.0498'), text)).toBe(wrong),
  );

  it.each([
    '0.0498.1',
    '0,04,98',
    '0.04 98',
    '0.0498 0.0498',
    '0.0498; 0.05',
    '[0.0498]; 3',
    '0.0498 and',
    'about 0.05',
    'x',
    'NaN',
    'Infinity',
    '∞',
    '1/0',
    '0/0',
    '-1/0',
    'ln(0)',
    '(-1)!',
    '1e999',
    '10^400',
    '200!',
    '|0>',
    '|0⟩ + |1⟩',
    '0.0498 +',
    '(0.0498',
    '0.0498)',
    '1 + i',
    'sqrt(-1)',
    '0.0498 = 0.05',
    'P(n = 3 = 0.0498',
    '(0.0498 = 0.05) = 0.0498',
    '±0.0498',
    '0.0498 ± 0.001',
    '0.0498 foo',
    'sin',
    'sin 0.05',
    'MHz',
    '1..2',
    '--',
    '?',
  ])('%s cannot be read', (text) => {
    const checked = judgeLine(numberWith('0.0498'), text);
    expect(checked).toMatchObject({ verdict: 'unreadable', fraction: 0 });
    expect('problem' in checked && checked.problem).toMatch(/^\S.{8,}[.?]$/);
  });

  it.each(['', ' ', '\n\t', '\u00a0', '\u200b'])('%j is unanswered', (text) =>
    expect(verdictOf(numberWith('0.0498'), text)).toBe('unanswered 0'),
  );
});

describe('large numbers, key 1234.5', () => {
  const part = numberWith('1234.5', { tolerance: { relative: 1e-4 } });
  it.each([
    ['1234.5', right],
    ['1234,5', right],
    ['1 234.5', right],
    ['1\u2009234.5', right],
    ['1\u202f234,5', right],
    ['1\u00a0234.5', right],
    ['1,234.5', right],
    ['1.234,5', right],
    ['1.2345e3', right],
    ['1.2345 × 10³', right],
    ['12 34.5', unreadable],
    ['1 2345', unreadable],
    ['1  234.5', unreadable],
    ['1,23.4.5', unreadable],
  ])('%s: %s', (text, verdict) => expect(verdictOf(part, text)).toBe(verdict));
});

describe('a comma that could be either', () => {
  it.each(['1,234', '12,345', '999,000', '-1,234', '1,234e3', '2*1,234', '3 + 1,500', '1,234 m'])(
    '%s is asked about',
    (text) => {
      const checked = judgeLine(numberWith('1.234'), text);
      expect(checked).toMatchObject({ verdict: 'unreadable', fraction: 0 });
      expect('problem' in checked && checked.problem).toContain('?');
    },
  );

  it.each([
    ['0,234', '0.234'],
    ['1,2345', '1.2345'],
    ['1,23', '1.23'],
    ['1234,567', '1234.567'],
    ['1,234,567', '1234567'],
    ['1,234.5', '1234.5'],
    ['0,050', '0.05'],
    ['00,123', '0.123'],
  ])('%s is not', (text, key) =>
    expect(verdictOf(numberWith(key, { tolerance: { relative: 1e-6 } }), text)).toBe(right),
  );
});

describe('arithmetic', () => {
  it.each([
    ['sqrt(2)/2', Math.SQRT1_2],
    ['√2/2', Math.SQRT1_2],
    ['√(2)/2', Math.SQRT1_2],
    ['1/√2', Math.SQRT1_2],
    ['\\sqrt{2}/2', Math.SQRT1_2],
    ['\\frac{1}{\\sqrt{2}}', Math.SQRT1_2],
    ['2^-0.5', Math.SQRT1_2],
    ['2^{-1/2}', Math.SQRT1_2],
    ['cos(pi/4)', Math.SQRT1_2],
    ['cos(π/4)', Math.SQRT1_2],
    ['sin(45°)', Math.SQRT1_2],
    ['cos(45 deg)', Math.SQRT1_2],
    ['e^-2', Math.exp(-2)],
    ['e^{-2}', Math.exp(-2)],
    ['e⁻²', Math.exp(-2)],
    ['exp(-2)', Math.exp(-2)],
    ['1/e^2', Math.exp(-2)],
    ['3/8', 0.375],
    ['½', 0.5],
    ['½ + ¼', 0.75],
    ['1½', 1.5],
    ['3½', 3.5],
    ['½ π', Math.PI / 2],
    ['½·10^-3', 0.0005],
    ['3!', 6],
    ['3!/2!', 3],
    ['2^3^2', 512],
    ['-2^2', -4],
    ['(-2)^2', 4],
    ['2³', 8],
    ['10³', 1000],
    ['2π', 2 * Math.PI],
    ['2pi', 2 * Math.PI],
    ['2 pi', 2 * Math.PI],
    ['1/2 pi', Math.PI / 2],
    ['1/(2π)', 1 / (2 * Math.PI)],
    ['pi^2/6', Math.PI ** 2 / 6],
    ['ln(2)', Math.LN2],
    ['log(e)', 1],
    ['log10(1000)', 3],
    ['4 e^-4', 4 * Math.exp(-4)],
    ['4e^-4', 4 * Math.exp(-4)],
    ['e^(-4)*4^3/3!', (Math.exp(-4) * 64) / 6],
    ['sinh(1)^2', Math.sinh(1) ** 2],
    ['sinh²(1)', Math.sinh(1) ** 2],
    ['tanh(0.5)', Math.tanh(0.5)],
    ['arctan(1)', Math.PI / 4],
    ['asin(1/2)', Math.PI / 6],
    ['1/cosh(0.6)', 1 / Math.cosh(0.6)],
    ['3(2+1)', 9],
    ['(1+1)(2+1)', 6],
    ['i^2', -1],
    ['i*i', -1],
    ['abs(-3)', 3],
    ['|-3|', 3],
    ['6÷3', 2],
    ['2 − 3', -1],
    ['8^(1/3)', 2],
    ['50% * 3', 1.5],
  ])('%s', (text, value) =>
    expect(verdictOf(numberWith(String(value), { tolerance: { relative: 1e-9 } }), text)).toBe(right),
  );
});

describe('tolerance', () => {
  it.each([
    [{ relative: 0.01 }, '100', '101', right],
    [{ relative: 0.01 }, '100', '101.0001', wrong],
    [{ relative: 0.01 }, '-100', '-99', right],
    [{ relative: 0.01 }, '0', '0', right],
    [{ relative: 0.01 }, '0', '1e-9', wrong],
    [{ absolute: 0.1 }, '0', '0.1', right],
    [{ absolute: 0.1 }, '0.3', '0.4', right],
    [{ absolute: 0.1 }, '0.3', '0.2', right],
    [{ absolute: 5, relative: 0.01 }, '100', '104.9', right],
    [{ absolute: 5, relative: 0.01 }, '1000', '1009', right],
    [{ significantFigures: 3 }, '99.95', '99.9', right],
    [{ significantFigures: 3 }, '99.95', '100', right],
    [{ significantFigures: 3 }, '99.95', '99.8', wrong],
    [{ significantFigures: 2 }, '0.00999', '0.01', right],
    [{ significantFigures: 2 }, '-0.456', '-0.46', right],
    [{ significantFigures: 2 }, '-0.456', '-0.45', wrong],
    [{ significantFigures: 2 }, '-0.456', '-0.452', right],
    [{ significantFigures: 1, absolute: 1e-9 }, '0.04', '0.044', right],
    [{ significantFigures: 3, relative: 0.05 }, '3.14159', '3', right],
    [{ significantFigures: 4 }, '123456', '123450', right],
    [{ significantFigures: 4 }, '123456', '123400', wrong],
  ])('%j around %s: %s is %s', (tolerance, key, text, verdict) =>
    expect(verdictOf(numberWith(key, { tolerance }), text)).toBe(verdict),
  );
});
