import { describe, expect, it } from 'vitest';
import { defaultConvention } from '../optics/convention';
import { KeyEvaluator } from './key-task';

const evaluator = new KeyEvaluator();

function draw(expression: string, mode: 1 | 2 = 1, convention = defaultConvention) {
  const wanted = { kind: 'picture', mode, convention } as const;
  const { key, fault } = evaluator.evaluate({ expression, givens: {}, convention, wanted });
  if (!key || !('picture' in key) || !key.picture) throw new Error(fault?.message ?? 'There is no picture.');
  return key.picture;
}

describe('pictureOf', () => {
  it('shows the state that the key asks about, not those it is made of', () => {
    const picture = draw('photonProbability(output(beamSplitter(product(coherent(2), vacuum()), 0.7), 2), 0)');
    expect(picture.mean).toBeCloseTo(1.2, 12);
    expect(picture.asked).toBe(0);
    // A coherent state has Poisson's distribution.
    expect(picture.bars?.probabilities[0]).toBeCloseTo(Math.exp(-1.2), 12);
    expect(picture.bars?.first).toBe(0);
  });

  it('draws a negative Wigner function around the origin, with axes of one scale', () => {
    const { wigner } = draw('wigner(lose(cat(1.4, pi), 0.85), 0, 0)');
    expect(wigner).not.toBeNull();
    const { points, values, x, p, least, most } = wigner!;
    expect(values).toHaveLength(points ** 2);
    expect(x).toEqual(p);
    expect(x[0]).toBeCloseTo(-x[1], 12);
    expect(least).toBeLessThan(-0.1);
    expect(most).toBeGreaterThan(0.1);
    // W(0, 0) is in the middle, and the least value: −0.1688 at η = 0.85, as in the problem of the demonstration.
    const middle = values[(values.length - 1) / 2] ?? 0;
    expect((middle / 1000) * wigner!.scale).toBeCloseTo(-0.1688, 3);
  });

  it('integrates to 1', () => {
    for (const expression of ['meanPhotons(squeezed(0.8))', 'meanPhotons(displaced(fock(2), 1 + i))']) {
      const { wigner } = draw(expression);
      const { points, x, p, values, scale } = wigner!;
      const cell = ((x[1] - x[0]) / (points - 1)) * ((p[1] - p[0]) / (points - 1));
      const sum = values.reduce((total, value) => total + value, 0);
      expect((sum / 1000) * scale * cell).toBeCloseTo(1, 2);
    }
  });

  it('uses the quadratures of the course', () => {
    const quarter = draw('meanPhotons(vacuum())', 1, { ...defaultConvention, vacuumVariance: 0.25 });
    expect(quarter.wigner?.most).toBeCloseTo(2 / Math.PI, 12);
  });

  it('follows the amplitude of a damped state with the circle of its spread', () => {
    const { path } = draw('meanPhotons(damp(coherent(2), 1, 2, 0.5))');
    expect(path?.passages).toEqual(['damp']);
    const [start, end] = [path!.points[0]!, path!.points.at(-1)!];
    expect(start).toEqual({ x: 2 * Math.SQRT2, p: 0, spread: Math.SQRT1_2 });
    expect(end.x).toBeCloseTo(2 * Math.SQRT2 * Math.exp(-1), 12);
    expect(end.spread ** 2).toBeCloseTo(0.5 + 0.5 * (1 - Math.exp(-2)), 12);
  });

  it('lets an amplified circle grow: V → G V + (G − 1)(1 + n̄)', () => {
    const { path } = draw('meanPhotons(amplify(coherent(1), 4))');
    expect(path!.points.at(-1)!.spread ** 2).toBeCloseTo(3.5, 12);
    expect(path!.points.at(-1)!.x).toBeCloseTo(2 * Math.SQRT2, 12);
  });

  it('shows one mode of a joint state, or the other', () => {
    expect(draw('visibility(product(fock(1), fock(3)))').mean).toBeCloseTo(1, 12);
    expect(draw('visibility(product(fock(1), fock(3)))', 2).mean).toBeCloseTo(3, 12);
  });

  it('draws a state whose figure is undefined, and says where there is none', () => {
    expect(draw('g2(vacuum())').mean).toBe(0);
    expect(() => draw('1 + 1')).toThrow('No state of light');
  });

  it('shows a broad distribution where it is, in steps', () => {
    const { bars } = draw('meanPhotons(coherent(50))');
    const { first, step, probabilities } = bars!;
    expect(step).toBeGreaterThan(1);
    expect(first).toBeGreaterThan(2200);
    const highest = probabilities.indexOf(Math.max(...probabilities));
    expect(Math.abs(first + highest * step - 2500)).toBeLessThan(2 * step);
  });

  it('has no Wigner function to show where it would take too long, and bars all the same', () => {
    const picture = draw('meanPhotons(thermal(400))');
    expect(picture.bars).not.toBeNull();
  });
});
