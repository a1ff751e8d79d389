import { describe, expect, it } from 'vitest';
import { given, type Given } from '@shared/problems';
import { countVariants, drawNumbers, drawPlainGivens, plainGivensOf } from './draw-givens';
import { printFigures, printGiven } from './print-given';

const build = (overrides: object): Given => given.parse({ name: 'x', symbol: 'x', ...overrides });
const nbar = build({ name: 'nbar', kind: 'uniform', low: 2, high: 8, step: 0.5 });
const splitter = build({ name: 'T', kind: 'choice', values: [0.35, 0.5, 0.7] });
const fixed = build({ name: 'eta', kind: 'fixed', value: 0.6, decimals: 2 });
const content = { givens: [nbar, splitter, fixed] };

describe('drawPlainGivens', () => {
  it('draws the same values for the same seed', () => {
    expect(drawPlainGivens(content, 'set/problem/student')).toEqual(drawPlainGivens(content, 'set/problem/student'));
  });

  it('draws only values of the range, and all of them', () => {
    const drawn = Array.from({ length: 400 }, (_, index) => drawPlainGivens(content, String(index))['nbar']?.value);
    expect([...new Set(drawn)].sort((one, other) => one! - other!)).toEqual([
      2, 2.5, 3, 3.5, 4, 4.5, 5, 5.5, 6, 6.5, 7, 7.5, 8,
    ]);
  });

  it('keeps a given where another is added or moved', () => {
    const more = { givens: [fixed, build({ name: 'r', kind: 'uniform', low: 0, high: 1, step: 0.01 }), nbar] };
    expect(drawPlainGivens(more, 'seed')['nbar']).toEqual(drawPlainGivens(content, 'seed')['nbar']);
  });

  it('draws from any range numbers that print exactly and lie inside it', () => {
    for (const [low, high, step] of [
      [0.1, 0.9, 0.1],
      [-3, 3, 0.75],
      [1e-9, 5e-9, 1e-9],
      [0.25, 0.85, 0.2],
    ] as const) {
      const range = { givens: [build({ kind: 'uniform', low, high, step })] };
      for (let number = 1; number <= countVariants(range); number++) {
        const { value, printed } = plainGivensOf(range, number)['x']!;
        expect(value).toBe(Number(printed));
        expect(Math.abs(value - (low + (number - 1) * step))).toBeLessThan(step * 1e-9);
      }
    }
  });
});

describe('numbered variants', () => {
  it('counts them', () => {
    expect(countVariants(content)).toBe(39);
    expect(countVariants({ givens: [] })).toBe(1);
  });

  it('gives each number other givens', () => {
    const all = Array.from({ length: 39 }, (_, index) => JSON.stringify(plainGivensOf(content, index + 1)));
    expect(new Set(all).size).toBe(39);
    expect(plainGivensOf(content, 1)).toEqual({
      nbar: { value: 2, printed: '2.0' },
      T: { value: 0.35, printed: '0.35' },
      eta: { value: 0.6, printed: '0.60' },
    });
  });

  it('samples without repetition, or takes all there are', () => {
    expect(drawNumbers(content, 5, 'a')).toHaveLength(5);
    expect(drawNumbers(content, 5, 'a')).toEqual(drawNumbers(content, 5, 'a'));
    expect(drawNumbers({ givens: [splitter] }, 5, 'a')).toEqual([1, 2, 3]);
  });
});

describe('printGiven', () => {
  it('prints a step’s decimals, and the most decimals among choices', () => {
    expect(printGiven(nbar, 4).printed).toBe('4.0');
    expect(printGiven(splitter, 0.5).printed).toBe('0.50');
  });

  it('keeps an exponent where decimals would not serve, and never prints minus nothing', () => {
    expect(printGiven(build({ kind: 'fixed', value: 6.02e23 }), 6.02e23).printed).toBe('6.02e23');
    expect(printGiven(build({ kind: 'uniform', low: -1, high: 1, step: 0.1 }), -1e-17).printed).toBe('0.0');
  });

  it('carries the unit', () => {
    expect(printGiven(build({ kind: 'fixed', value: 3, unit: 'MHz' }), 3)).toEqual({
      value: 3,
      printed: '3',
      unit: 'MHz',
    });
  });

  it.each([
    [0.123456, 3, '0.123'],
    [0.7, 4, '0.7000'],
    [1234.5678, 2, '1200'],
    [0.00001234, 2, '1.2e-5'],
    [123456789, 3, '1.23e8'],
    [9.9996, 4, '10.00'],
    [-0.5, 1, '-0.5'],
    [0, 4, '0'],
  ])('prints %d to %d significant figures as %s', (value, figures, printed) => {
    expect(printFigures(value, figures)).toBe(printed);
  });
});
