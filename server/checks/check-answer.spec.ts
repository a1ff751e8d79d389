import { answerSpecification, type AnswerSpecification } from '@shared/answer-forms';
import { describe, expect, it } from 'vitest';
import { checkAnswer, type CheckInput, type PartKeys } from './check-answer';
import { KeyProblem, type ComputedKey } from './key-value';

type Checkable = CheckInput['part'];

function partOf(fields: Record<string, unknown>): Checkable {
  const part: AnswerSpecification = answerSpecification.parse(
    fields['form'] === 'choice' ? fields : { key: 'k', ...fields },
  );
  if (part.form === 'worked') throw new Error('Not checked.');
  return part;
}

const numberPart = (more: Record<string, unknown> = {}) =>
  partOf({ form: 'number', tolerance: { relative: 0.01 }, ...more });
const check = (part: Checkable, key: ComputedKey | ComputedKey['value'], text: string, more: Partial<PartKeys> = {}) =>
  checkAnswer({ part, text, keys: { key: typeof key === 'object' && 'value' in key ? key : { value: key }, ...more } });
const verdict = (...given: Parameters<typeof check>) => {
  const { verdict: name, fraction } = check(...given);
  return `${name} ${fraction}`;
};

describe('tolerance', () => {
  // Rules: |x − k| ≤ max(absolute, relative·|k|); half a unit of the s-th figure; the widest holds.
  it.each([
    [{ relative: 0.01 }, 100, '101', true],
    [{ relative: 0.01 }, 100, '101.1', false],
    [{ relative: 0.01 }, -100, '-99', true],
    [{ absolute: 0.1 }, 0.3, '0.4', true],
    [{ absolute: 0.1 }, 0.3, '0.41', false],
    [{ absolute: 5, relative: 0.01 }, 100, '105', true],
    [{ absolute: 5, relative: 0.01 }, 100, '105.1', false],
    [{ absolute: 0.5, relative: 0.01 }, 100, '101', true],
    [{ significantFigures: 3 }, Math.PI, '3.14', true],
    [{ significantFigures: 3 }, Math.PI, '3.1366', true],
    [{ significantFigures: 3 }, Math.PI, '3.15', false],
    [{ significantFigures: 3 }, 0.0012345, '0.00123', true],
    [{ significantFigures: 3 }, 0.0012345, '0.00124', false],
    [{ significantFigures: 2 }, 999.9, '1000', true],
    [{ significantFigures: 3 }, 1000, '1004.9', true],
    [{ significantFigures: 3 }, 1000, '1005.1', false],
    [{ significantFigures: 3 }, 0, '0', true],
    [{ significantFigures: 3 }, 0, '1e-12', false],
    [{ significantFigures: 1, relative: 0.001 }, 12, '16', true],
    [{ relative: 0.01 }, 0, '0', true],
  ])('%j around %d: %s', (tolerance, key, text, right) => {
    expect(verdict(numberPart({ tolerance }), key, text)).toBe(right ? 'right 1' : 'wrong 0');
  });
});

describe('units', () => {
  const hertz = numberPart({ unit: 'MHz' });
  it.each([
    ['3MHz', 'right 1'],
    ['3 000 kHz', 'right 1'],
    ['3e6 s^-1', 'right 1'],
    ['3e6 1/s', 'right 1'],
    ['3 /µs', 'right 1'],
    ['3', 'unit 0.5'],
    ['3e6', 'wrong 0'],
    ['3 mHz', 'wrong 0'],
    ['3e6 rad/s', 'wrong 0'],
    ['18.85e6 rad/s', 'wrong 0'],
    ['3 MHz m', 'wrong 0'],
    ['3 MHzz', 'unreadable 0'],
    ['300 %', 'unit 0.5'],
  ])('a key of 3 MHz and %s', (text, expected) => {
    expect(verdict(hertz, { value: 3e6, unit: 'Hz' }, text)).toBe(expected);
    expect(verdict(hertz, { value: 3, unit: 'MHz' }, text)).toBe(expected);
  });

  it.each([
    ['rad/s', 2e6, '2 rad/µs', 'right 1'],
    ['rad/s', 2e6, '2e6 s^-1', 'right 1'],
    ['rad/s', 2e6, '2 MHz', 'wrong 0'],
    ['rad/s', 2e6, '0.3183 MHz', 'wrong 0'],
    ['s^-1', 2e6, '2 MHz', 'right 1'],
    ['s^-1', 2e6, '2e6 rad/s', 'right 1'],
    ['nm', 589.3e-9, '5893 Å', 'right 1'],
    ['nm', 589.3e-9, '0.5893 µm', 'right 1'],
    ['nm', 589.3e-9, '589.3', 'unit 0.5'],
    ['nm', 589.3e-9, '589.3 nm/s', 'wrong 0'],
    ['rad', Math.PI / 2, '90°', 'right 1'],
    ['rad', Math.PI / 2, '90 deg', 'right 1'],
    ['rad', Math.PI / 2, '1.5708', 'unit 0.5'],
    ['K', 298.15, '25 °C', 'right 1'],
  ])('a key in %s (%d in SI) and %s', (unit, value, text, expected) => {
    const si = { nm: 'm', 'rad/s': 'rad / s', 's^-1': '1 / s', rad: 'rad', K: 'K' }[unit];
    expect(verdict(numberPart({ unit, tolerance: { relative: 1e-3 } }), { value, unit: si }, text)).toBe(expected);
  });

  it('takes the tolerance in the unit of the part', () => {
    const part = numberPart({ unit: 'nm', tolerance: { absolute: 0.5 } });
    expect(verdict(part, { value: 589.3e-9, unit: 'm' }, '589.7 nm')).toBe('right 1');
    expect(verdict(part, { value: 589.3e-9, unit: 'm' }, '590 nm')).toBe('wrong 0');
    const figures = numberPart({ unit: 'eV', tolerance: { significantFigures: 3 } });
    expect(verdict(figures, { value: 1.9587 * 1.602176634e-19, unit: 'J' }, '1.96 eV')).toBe('right 1');
    expect(verdict(figures, { value: 1.9587 * 1.602176634e-19, unit: 'J' }, '1.97 eV')).toBe('wrong 0');
  });

  it('keeps decibels to themselves', () => {
    const part = numberPart({ unit: 'dB', tolerance: { absolute: 0.02 } });
    expect(verdict(part, 5.2115, '5.21 dB')).toBe('right 1');
    expect(verdict(part, 5.2115, '5.21')).toBe('unit 0.5');
    expect(verdict(part, 5.2115, '5.21 m')).toBe('wrong 0');
    expect(verdict(part, 5.2115, '-5.21 dB')).toBe('wrong 0');
  });

  it('refuses a unit where none is asked for, percent excepted', () => {
    expect(check(numberPart(), 0.35, '0.35 m')).toMatchObject({
      verdict: 'wrong',
      problem: 'A pure number is asked for, and the answer has the unit m.',
    });
    expect(verdict(numberPart(), 0.35, '35%')).toBe('right 1');
    expect(verdict(numberPart(), 0.35, '3.5e-3 m/cm')).toBe('right 1');
    expect(verdict(numberPart(), 1, '1 rad')).toBe('wrong 0');
  });

  it('gives the fraction that the part names', () => {
    expect(verdict(numberPart({ unit: 'rad/s', unitFraction: 0.25 }), { value: 2e6, unit: 'rad/s' }, '2e6')).toBe(
      'unit 0.25',
    );
    expect(verdict(numberPart({ unit: 'rad/s', unitFraction: 0 }), { value: 2e6, unit: 'rad/s' }, '2e6')).toBe(
      'unit 0',
    );
  });

  it('asks for a unit where the key has one and the part names none', () => {
    expect(verdict(numberPart(), { value: 3, unit: 'm' }, '300 cm')).toBe('right 1');
    expect(verdict(numberPart(), { value: 3, unit: 'm' }, '3')).toBe('unit 0.5');
  });

  it('says for the author that key and part do not go together', () => {
    expect(() => check(numberPart({ unit: 'MHz' }), { value: 3, unit: 'm' }, '3 MHz')).toThrow(KeyProblem);
    expect(() => check(numberPart({ unit: 'wat' }), 3, '3')).toThrow('The unit wat is not known.');
    expect(() => check(numberPart(), { re: 1, im: 1 }, '3')).toThrow(KeyProblem);
    expect(() => check(numberPart(), [1], '3')).toThrow(KeyProblem);
  });
});

describe('order of trial', () => {
  const slips = [
    { name: 'other output', expression: 's', feedback: 'This is the other output.', fraction: 0.5 },
    { expression: 't', feedback: 'Amplitude instead of intensity.', fraction: 0.25 },
  ];
  const part = numberPart({ slips, followThrough: 0.75 });
  const values = (...list: number[]): ComputedKey[] => list.map((value) => ({ value }));
  const own = { key: { value: 5 }, slips: values(6, 7), earlierRight: false };

  it('right comes before a slip with the same value', () => {
    expect(verdict(part, 1, '1', { slips: values(1, 1) })).toBe('right 1');
  });

  it('a slip is named, in the order of the slips', () => {
    expect(check(part, 1, '2', { slips: values(2, 2) })).toMatchObject({ verdict: 'slip', slip: 0, fraction: 0.5 });
    expect(check(part, 1, '3', { slips: values(2, 3) })).toMatchObject({ verdict: 'slip', slip: 1, fraction: 0.25 });
    expect(check(part, 1, '2', { slips: values(2, 3) }).relation).toEqual({ name: 'slip: other output' });
    expect(check(part, 1, '3', { slips: values(2, 3) }).relation).toEqual({ name: 'slip 2' });
  });

  it('a slip that could not be computed is passed over', () => {
    expect(check(part, 1, '3', { slips: [undefined, { value: 3 }] })).toMatchObject({ verdict: 'slip', slip: 1 });
  });

  it('follow-through comes before a slip', () => {
    expect(verdict(part, 1, '5', { own, slips: values(5, 5) })).toBe('follow-through 0.75');
  });

  it('follow-through is right where all earlier answers are', () => {
    expect(verdict(part, 1, '5', { own: { ...own, earlierRight: true } })).toBe('right 1');
    expect(verdict(numberPart(), 1, '5', { own: { ...own, earlierRight: true } })).toBe('right 1');
  });

  it('follow-through needs the part to allow it', () => {
    expect(verdict(numberPart(), 1, '5', { own })).toBe('wrong 0');
    expect(check(numberPart(), 1, '5', { own }).relation.name).toBe('right from the own earlier answer');
  });

  it('slips are tried with the keys of earlier parts, then with own answers', () => {
    expect(check(part, 1, '6', { own, slips: values(2, 6) })).toMatchObject({ verdict: 'slip', slip: 1 });
    expect(check(part, 1, '7', { own, slips: values(2, 3) })).toMatchObject({ verdict: 'slip', slip: 1 });
  });

  it('a missing unit is found before follow-through, and never pays', () => {
    const withUnit = numberPart({ unit: 'Hz', slips, followThrough: 0.75, unitFraction: 0.4 });
    expect(verdict(withUnit, 1, '1', { own })).toBe('unit 0.4');
    expect(verdict(withUnit, 1, '5', { own })).toBe('follow-through 0.4');
    expect(verdict(withUnit, 1, '5 Hz', { own })).toBe('follow-through 0.75');
    expect(verdict(withUnit, 1, '2', { slips: values(2) })).toBe('slip 0.4');
    expect(verdict(withUnit, 1, '5', { own: { ...own, earlierRight: true } })).toBe('unit 0.4');
  });

  it('a slip may have another unit than the key', () => {
    const withUnit = numberPart({ unit: 'Hz', slips });
    expect(verdict(withUnit, 1, '2 m', { slips: [{ value: 2, unit: 'm' }] })).toBe('slip 0.5');
  });

  it('an empty answer is unanswered, one that cannot be read unreadable', () => {
    expect(check(part, 1, '  ')).toMatchObject({ verdict: 'unanswered', fraction: 0, readAs: '' });
    expect(check(part, 1, '1,234')).toMatchObject({
      verdict: 'unreadable',
      problem: expect.stringContaining('Is 1,234') as string,
    });
    expect(check(part, 1, '1 2')).toMatchObject({ verdict: 'unreadable', fraction: 0 });
  });
});

describe('other forms', () => {
  it('complex numbers, up to a phase where the part says so', () => {
    const part = partOf({ form: 'complex', tolerance: { relative: 0.01 } });
    expect(verdict(part, { re: Math.SQRT1_2, im: Math.SQRT1_2 }, 'exp(i*pi/4)')).toBe('right 1');
    expect(verdict(part, { re: 0, im: 0.6 }, '0.6')).toBe('wrong 0');
    expect(check(part, { re: 0.3, im: 0.6 }, '0.3 - 0.6i').relation.name).toBe('the complex conjugate of the key');
    expect(verdict(part, { re: 0, im: 0.6 }, '0.6i m')).toBe('wrong 0');
    const upToPhase = partOf({ form: 'complex', tolerance: { relative: 0.01 }, upToPhase: true });
    expect(verdict(upToPhase, { re: 0, im: 0.6 }, '0.6 exp(1.2i)')).toBe('right 1');
    expect(verdict(upToPhase, { re: 0, im: 0.6 }, '0.62')).toBe('wrong 0');
  });

  it('lists, in order and of one length', () => {
    const part = partOf({ form: 'list', tolerance: { absolute: 0.01 } });
    expect(verdict(part, [1, 2, 3.5], '1; 2; 3,5')).toBe('right 1');
    expect(verdict(part, [1, 2, 3.5], '2; 1; 3.5')).toBe('wrong 0');
    expect(check(part, [1, 2, 3.5], '[1, 2]')).toMatchObject({
      verdict: 'wrong',
      problem: 'The list has 2 entries where the key has 3.',
    });
    expect(verdict(part, [{ re: 0, im: 1 }, 2], 'i; 2')).toBe('right 1');
    expect(check(part, [1, 2, 3.5], '3.5; 2; 1').relation.name).toBe('the key in reverse order');
    expect(check(part, [1, 2, 3.5], '2; 4; 7').relation).toEqual({ name: 'twice the key', factor: 2 });
  });

  it('distributions, by total variation', () => {
    const part = partOf({ form: 'distribution', tolerance: { totalVariation: 0.02 } });
    expect(verdict(part, [0.5, 0.5, 0], '0.51; 0.49; 0')).toBe('right 1');
    expect(verdict(part, [0.5, 0.5, 0], '0.53; 0.47; 0')).toBe('wrong 0');
    expect(check(part, [0.5, 0.5, 0], '0.51; 0.5; -0.01')).toMatchObject({
      verdict: 'wrong',
      problem: 'Entry 3 is a negative probability.',
    });
    expect(check(part, [0.5, 0.5, 0], '0.51; 0.5; 0')).toMatchObject({
      verdict: 'wrong',
      problem: 'The probabilities add to more than 1.',
    });
    expect(verdict(part, [0.5, 0.5, 0], '0.5; 0.5')).toBe('wrong 0');
    expect(verdict(part, [0.5, 0.25], '0.5; 0.25')).toBe('right 1');
  });

  it('matrices, of one shape', () => {
    const part = partOf({ form: 'matrix', tolerance: { absolute: 0.01 } });
    const key = [
      [0.625, { re: 0, im: -0.375 }],
      [{ re: 0, im: 0.375 }, 0.375],
    ];
    expect(verdict(part, key, '0.625, -0.375i; 0.375i, 0.375')).toBe('right 1');
    expect(check(part, key, '0.625, 0.375i; -0.375i, 0.375')).toMatchObject({
      verdict: 'wrong',
      relation: { name: 'the complex conjugate of the key' },
    });
    expect(check(part, key, '0.625; 0.375')).toMatchObject({ problem: 'The matrix is 2 × 1 where the key is 2 × 2.' });
  });

  it('states, up to a global phase and normalisation', () => {
    const part = partOf({ form: 'state', minimumFidelity: 0.999 });
    const half = { re: 0, im: Math.SQRT1_2 };
    const key = {
      modes: 2,
      amplitudes: [
        { photons: [2, 0], ...half },
        { photons: [0, 2], ...half },
      ],
    } as const;
    expect(verdict(part, key, '|2,0> + |0,2>')).toBe('right 1');
    expect(verdict(part, key, 'i(|2,0>+|0,2>)/sqrt(2)')).toBe('right 1');
    expect(verdict(part, key, '(|2,0> - |0,2>)/sqrt(2)')).toBe('wrong 0');
    expect(check(part, key, '|2>')).toMatchObject({
      verdict: 'wrong',
      problem: 'The answer is a state of one mode, the key one of 2 modes.',
      relation: { name: 'a state of another number of modes' },
    });
    const path = {
      modes: 2,
      amplitudes: [
        { photons: [1, 0], re: 0.6, im: 0 },
        { photons: [0, 1], re: 0, im: 0.8 },
      ],
    } as const;
    expect(check(part, path, '0.8i|1,0> + 0.6|0,1>').relation.name).toBe('the key with its modes exchanged');
    expect(check(part, path, '0.6|1,0> - 0.8i|0,1>').relation.name).toBe('the key with its amplitudes conjugated');
    expect(check(part, path, '0.36|1,0> + 0.64|0,1>').relation.name).toBe(
      'probabilities of the key in place of amplitudes',
    );
  });

  it('mixed keys by ⟨a|ρ|a⟩, coherent states by their amplitudes', () => {
    const part = partOf({ form: 'state', minimumFidelity: 0.7 });
    const mixed = {
      modes: 1,
      elements: [
        { row: [0], column: [0], re: 0.75, im: 0 },
        { row: [1], column: [1], re: 0.25, im: 0 },
      ],
    } as const;
    expect(verdict(part, mixed, '|0>')).toBe('right 1');
    expect(verdict(part, mixed, '|1>')).toBe('wrong 0');
    // ⟨n|α⟩ = e^{−|α|²/2} αⁿ/√n! for α = 1.
    let size = Math.exp(-0.5);
    const amplitudes = Array.from({ length: 40 }, (_, n) => {
      if (n > 0) size /= Math.sqrt(n);
      return { photons: [n], re: size, im: 0 };
    });
    const strict = partOf({ form: 'state', minimumFidelity: 1 - 1e-9 });
    expect(verdict(strict, { modes: 1, amplitudes }, 'coherent(1)')).toBe('right 1');
    expect(verdict(strict, { modes: 1, amplitudes }, 'coherent(1.01)')).toBe('wrong 0');
  });

  it('choices, in either case', () => {
    const single = partOf({ form: 'choice', options: ['a', 'b', 'c'], correct: ['b'] });
    const judge = (part: Checkable, text: string) => checkAnswer({ part, text }).verdict;
    expect(judge(single, 'B')).toBe('right');
    expect(judge(single, 'a')).toBe('wrong');
    expect(judge(single, 'a,b')).toBe('wrong');
    expect(judge(single, 'e')).toBe('unreadable');
    expect(judge(single, '')).toBe('unanswered');
    const several = partOf({
      form: 'choice',
      options: ['a', 'b', { label: 'c', text: 'thermal' }],
      correct: ['a', 'C'],
      several: true,
    });
    expect(judge(several, 'c, a')).toBe('right');
    expect(judge(several, 'a')).toBe('wrong');
    expect(judge(several, 'a, b, c')).toBe('wrong');
  });
});
