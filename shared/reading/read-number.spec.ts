import { describe, expect, it } from 'vitest';
import { readAnswer } from './read-answer';
import type { AnswerField } from './reading';

const field: AnswerField = { form: 'number', hint: 'pure number' };
const read = (text: string) => readAnswer(text, field);

// Rules of reading that the product states for its users; the values follow from arithmetic.
const numbers: readonly (readonly [text: string, value: number, readAs: string])[] = [
  ['0.0498', 0.0498, '0.0498'],
  ['.5', 0.5, '0.5'],
  ['5.', 5, '5'],
  ['007', 7, '7'],
  ['+3', 3, '3'],
  ['-0.0498', -0.0498, '−0.0498'],
  ['−0.0498', -0.0498, '−0.0498'],
  ['–2', -2, '−2'],
  ['0,35', 0.35, '0.35'],
  ['0,350', 0.35, '0.350'],
  ['12,5', 12.5, '12.5'],
  ['1,2345', 1.2345, '1.2345'],
  ['1234,567', 1234.567, '1234.567'],
  ['1,234,567', 1234567, '1\u202f234\u202f567'],
  ['1,234.5', 1234.5, '1234.5'],
  ['1.234,5', 1234.5, '1234.5'],
  ['1.234.567', 1234567, '1\u202f234\u202f567'],
  ['1 234.5', 1234.5, '1234.5'],
  ['1\u2009234,5', 1234.5, '1234.5'],
  ['1\u202f234\u202f567', 1234567, '1\u202f234\u202f567'],
  ['0.000 123', 0.000123, '0.000123'],
  ['4.98e-2', 0.0498, '4.98 × 10⁻²'],
  ['4.98E−2', 0.0498, '4.98 × 10⁻²'],
  ['4.98×10^-2', 0.0498, '4.98 × 10⁻²'],
  ['4.98 x 10^-2', 0.0498, '4.98 × 10⁻²'],
  ['4.98x10^-2', 0.0498, '4.98 × 10⁻²'],
  ['4.98 X 10^{-2}', 0.0498, '4.98 × 10⁻²'],
  ['4.98·10⁻²', 0.0498, '4.98 × 10⁻²'],
  ['4.98 \\times 10^{-2}', 0.0498, '4.98 × 10⁻²'],
  ['4.98 \\cdot 10^{-2}', 0.0498, '4.98 × 10⁻²'],
  ['4.98*10**-2', 0.0498, '4.98 × 10⁻²'],
  ['1.2345e3', 1234.5, '1.2345 × 10³'],
  ['½', 0.5, '0.5'],
  ['1½', 1.5, '1.5'],
  ['2 ¾', 2.75, '2.75'],
  ['3/8', 0.375, '0.375'],
  ['\\frac{3}{8}', 0.375, '0.375'],
  ['35%', 0.35, '0.35'],
  ['1,5 %', 0.015, '0.015'],
  ['35\\%', 0.35, '0.35'],
  ['sqrt(2)/2', Math.SQRT1_2, '0.7071068'],
  ['√2/2', Math.SQRT1_2, '0.7071068'],
  ['\\sqrt{2}/2', Math.SQRT1_2, '0.7071068'],
  ['2√3', 2 * Math.sqrt(3), '3.464102'],
  ['\\sqrt[3]{8}', 2, '2'],
  ['e^-2', Math.exp(-2), '0.1353353'],
  ['e^{-2}', Math.exp(-2), '0.1353353'],
  ['e⁻²', Math.exp(-2), '0.1353353'],
  ['exp(-2)', Math.exp(-2), '0.1353353'],
  ['exp[-2]', Math.exp(-2), '0.1353353'],
  ['cos(pi/4)', Math.SQRT1_2, '0.7071068'],
  ['cos(45°)', Math.SQRT1_2, '0.7071068'],
  ['sin²(π/6)', 0.25, '0.25'],
  ['ln(e^3)', 3, '3'],
  ['log(e)', 1, '1'],
  ['log10(1000)', 3, '3'],
  ['atanh(0.5)', Math.atanh(0.5), '0.5493061'],
  ['3!', 6, '6'],
  ['|−3|', 3, '3'],
  ['2(3+4)', 14, '14'],
  ['2π', 2 * Math.PI, '6.283185'],
  ['1/2π', Math.PI / 2, '1.570796'],
  ['1/(2π)', 1 / (2 * Math.PI), '0.1591549'],
  ['-2^2', -4, '−4'],
  ['2^3^2', 512, '512'],
  ['2^-1', 0.5, '0.5'],
  ['i^2', -1, '−1'],
  ['e^(iπ)', -1, '−1'],
  ['p=0.498', 0.498, '0.498'],
  ['P(3) = 0.35', 0.35, '0.35'],
  ['⟨n⟩ = 4', 4, '4'],
  ['g^(2)(0) = 2', 2, '2'],
  ['P_1 ≈ 0.35', 0.35, '0.35'],
  ['= 0.35', 0.35, '0.35'],
  ['$0.35$', 0.35, '0.35'],
];

describe('reading a number', () => {
  it.each(numbers)('reads %j', (text, value, readAs) => {
    const reading = read(text);
    expect(reading).toMatchObject({ kind: 'number', readAs });
    if (reading.kind === 'number')
      expect(Math.abs(reading.value - value)).toBeLessThanOrEqual(4e-16 * Math.abs(value) * 4);
  });

  it('shows what it left out', () => {
    expect(read('P(3) = 0.35')).toMatchObject({ dropped: 'P(3) =' });
    expect(read('0.35')).not.toHaveProperty('dropped');
  });

  it.each([
    ['4,742', 'Is 4,742 a little under five, or over four thousand?', '4.742', '4 742'],
    ['1,234', 'Is 1,234 a little over one, or over one thousand?', '1.234', '1 234'],
    ['7,000', 'Is 7,000 exactly seven, or exactly seven thousand?', '7.000', '7 000'],
    ['2,500', 'Is 2,500 two and a half, or over two thousand?', '2.500', '2 500'],
    ['742,318', 'Is 742,318 a little over 742, or over 742 thousand?', '742.318', '742 318'],
  ])('asks about the comma of %s', (text, question, decimal, grouped) => {
    expect(read(text)).toMatchObject({
      kind: 'question',
      question,
      choices: [
        { label: decimal, text: decimal },
        { label: grouped, text: grouped },
      ],
    });
  });

  it('keeps the rest of the answer in the choices', () => {
    const reading = read('N = -4,742 × 10^6');
    expect(reading).toMatchObject({ kind: 'question', at: 6 });
    if (reading.kind === 'question') {
      expect(reading.choices.map(({ text }) => text)).toEqual(['N = -4.742 × 10^6', 'N = -4 742 × 10^6']);
      for (const { text } of reading.choices) expect(read(text).kind).toBe('number');
    }
  });

  it.each([
    ['', 'empty'],
    [' \u2009\n', 'empty'],
  ])('takes %j for empty', (text, kind) => expect(read(text).kind).toBe(kind));

  it.each([
    ['12 34.5', 'Two numbers stand side by side; write × between them, or only one number.', 4],
    ['1 2345', 'Two numbers stand side by side; write × between them, or only one number.', 3],
    ['1.2.3', '“1.2.3” has two decimal signs.', 4],
    ['1,2,3', '“1,2,3” has commas in odd places; write a plain number.', 1],
    ['3 MHzz', '“MHzz” is neither a unit nor a name that is known here.', 3],
    ['3 hz', 'The unit “hz” is not known; did you mean “Hz”?', 3],
    ['x', '“x” is neither a unit nor a name that is known here.', 1],
    ['MHz', 'There is a unit but no number before it.', 1],
    ['1/0', 'The answer is not finite.', 1],
    ['ln(0)', 'The answer is not finite.', 1],
    ['1e999', 'The answer is not finite.', 1],
    ['∞', 'The answer is not finite.', 1],
    ['(-1)!', 'The answer is not finite.', 2],
    ['2i', 'This is the complex number 2 i; a real number is asked for.', 1],
    ['sqrt(-1)', 'This is the complex number i; a real number is asked for.', 1],
    ['1; 2', 'There are several values; this field takes one.', 2],
    ['[1, 2]', 'There are several values; this field takes one.', 3],
    ['0.5 ± 0.1', '“±” gives two values; write one.', 5],
    ['sqrt(2)/2 = 0.7071', 'Write one value, without a second “=”.', 11],
    ['(1', 'The bracket “(” is never closed.', 1],
    ['1)', 'The bracket “)” closes nothing.', 2],
    ['(1]', 'The bracket “(” is closed by “]”.', 3],
    ['1 +', 'The answer ends too early; something is missing at its end.', 4],
    ['sqrt 2', 'Write “sqrt” with brackets, as in sqrt(2).', 1],
    ['|1>', '“>” belongs to a state, and this field does not take one here.', 3],
    ['5 😀', 'The sign “😀” has no meaning here.', 3],
    ['3 m + 2 s', 'These units cannot be added to each other.', 7],
    ['exp(2 m)', 'A function takes a number without a unit.', 5],
  ])('says what is wrong with %s', (text, problem, at) => {
    expect(read(text)).toEqual({ kind: 'unreadable', problem, at });
  });

  it('refuses what is too long or too deep without working on it', () => {
    expect(read('1'.repeat(2001))).toMatchObject({ kind: 'unreadable' });
    expect(read('('.repeat(900) + '1' + ')'.repeat(900))).toMatchObject({ kind: 'unreadable' });
    expect(read('-'.repeat(1900) + '1')).toMatchObject({ kind: 'unreadable' });
    expect(read('1' + '!'.repeat(1900))).toMatchObject({ kind: 'unreadable' });
  });

  it('reads the same whatever the spacing', () => {
    for (const text of ['4.98 × 10 ^ -2', '4.98×10^-2', '  4.98  ×  10^ - 2  ', '4.98\u2009×\u200910^-2']) {
      expect(read(text)).toMatchObject({ kind: 'number', readAs: '4.98 × 10⁻²' });
    }
  });
});
