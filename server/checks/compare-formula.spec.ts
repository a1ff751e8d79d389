import { answerSpecification } from '@shared/answer-forms';
import type { Complex } from '@shared/reading/complex';
import { describe, expect, it } from 'vitest';
import { checkAnswer } from './check-answer';
import { comparedPoints, drawnPoints, formulaPoints } from './formula-points';

type Point = Readonly<Record<string, number>>;

function judge(
  variables: Record<string, unknown>,
  key: (point: Point) => Complex | number | null,
  text: string,
  relative = 1e-6,
) {
  const part = answerSpecification.parse({ form: 'formula', key: 'k', variables, tolerance: { relative } });
  if (part.form !== 'formula') throw new Error('Not a formula.');
  const atPoints = formulaPoints(part.variables).map((point) => {
    const value = key(point);
    return typeof value === 'number' ? (Number.isFinite(value) ? { re: value, im: 0 } : null) : value;
  });
  return checkAnswer({ part, text, keys: { key: { value: { atPoints } } } });
}
const at = (point: Point, name: string): number => point[name] ?? NaN;

describe('formulas', () => {
  const gain = { G: [1, 50] };
  const visibility = (point: Point) => at(point, 'G') / (3 * at(point, 'G') - 2);

  it.each(['G/(3G-2)', 'G/(G+2(G-1))', '1/(3-2/G)', '\\frac{G}{3G-2}', 'V = G/(3 G − 2)'])('%s is right', (text) => {
    expect(judge(gain, visibility, text).verdict).toBe('right');
  });

  it('shows the point where a wrong one differs', () => {
    const wrong = judge(gain, visibility, 'G/(3G+2)');
    expect(wrong.verdict).toBe('wrong');
    expect(wrong.point).toBeDefined();
    if (!wrong.point) return;
    const gainThere = at(wrong.point.at, 'G');
    expect(wrong.point.key?.re).toBeCloseTo(gainThere / (3 * gainThere - 2), 12);
    expect(wrong.point.answer?.re).toBeCloseTo(gainThere / (3 * gainThere + 2), 12);
  });

  it('is wrong where it is undefined and the key is not', () => {
    const undefinedThere = judge({ n: { integers: [0, 6] } }, () => 1, '(n-3)/(n-3)');
    expect(undefinedThere).toMatchObject({
      verdict: 'wrong',
      problem: 'The formula is undefined where the key is not: at n = 3 the key is 1.',
    });
    expect(undefinedThere.point).toMatchObject({ at: { n: 3 }, answer: null });
  });

  it('draws other points where both are undefined', () => {
    const pole = (point: Point) => (at(point, 'n') === 3 ? null : 1 / (at(point, 'n') - 3));
    expect(judge({ n: { integers: [0, 6] } }, pole, '1/(n-3)').verdict).toBe('right');
  });

  it('compares complex values', () => {
    const variables = { omega: [0.5, 3], t: [0, 3] };
    const key = (point: Point) => ({
      re: Math.cos(at(point, 'omega') * at(point, 't')),
      im: -Math.sin(at(point, 'omega') * at(point, 't')),
    });
    expect(judge(variables, key, 'e^{-iωt}').verdict).toBe('right');
    expect(judge(variables, key, 'e^{iωt}')).toMatchObject({
      verdict: 'wrong',
      relation: { name: 'the complex conjugate of the key' },
    });
    expect(judge(variables, key, 'cos(omega t)').verdict).toBe('wrong');
  });

  it('does not take rounding at a zero of the key for a difference', () => {
    expect(judge({ n: { integers: [0, 6] } }, () => 0, 'sin(pi n)').verdict).toBe('right');
    expect(judge({ x: [0, 2] }, (point) => Math.sin(at(point, 'x')) ** 2, '1 - cos(x)^2', 1e-9).verdict).toBe('right');
  });

  it.each([
    ['2G/(3G-2)', 'twice the key', 2],
    ['-G/(3G-2)', 'the key with the other sign', -1],
    ['1 - G/(3G-2)', 'one minus the key', undefined],
    ['(3G-2)/G', 'the reciprocal of the key', undefined],
    ['3G/(3G-2)', 'a constant times the key', 3],
  ])('recognises %s', (text, name, factor) => {
    const found = judge(gain, visibility, text).relation;
    expect(found.name).toBe(name);
    if (factor !== undefined) expect(found.factor).toBeCloseTo(factor, 9);
  });

  it('draws the same points for everyone, inside the ranges', () => {
    const points = formulaPoints({ G: [1, 50], n: { integers: [0, 3] } });
    expect(points).toEqual(formulaPoints({ n: { integers: [0, 3] }, G: [1, 50] }).map(({ n, G }) => ({ G, n })));
    expect(points).toHaveLength(drawnPoints);
    expect(comparedPoints).toBe(40);
    for (const point of points) {
      expect(at(point, 'G')).toBeGreaterThan(1);
      expect(at(point, 'G')).toBeLessThan(50);
      expect([0, 1, 2, 3]).toContain(point['n']);
    }
    expect(new Set(points.map((point) => point['n'])).size).toBe(4);
  });
});
