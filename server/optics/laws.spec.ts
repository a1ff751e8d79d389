import { describe, expect, it } from 'vitest';
import type { Complex } from './complex';
import { besselI, besselJ } from './special/bessel';
import { hermite, laguerre } from './special/polynomials';
import { poisson } from './special/distributions';
import { evaluateExpression, type SpecValue } from './testing/evaluate-expression';

/** Mulberry32 with a fixed seed, so that every run tests the same states. */
function seeded(seed: number): (low: number, high: number) => number {
  let state = seed;
  return (low, high) => {
    state = (state + 0x6d2b79f5) | 0;
    let mixed = Math.imul(state ^ (state >>> 15), state | 1);
    mixed ^= mixed + Math.imul(mixed ^ (mixed >>> 7), mixed | 61);
    return low + (high - low) * (((mixed ^ (mixed >>> 14)) >>> 0) / 2 ** 32);
  };
}

const real = (expression: string): number => Number(evaluateExpression(expression).value);
const list = (expression: string): readonly number[] => {
  const { value } = evaluateExpression(expression);
  if (!Array.isArray(value)) throw new Error('no list');
  return (value as readonly SpecValue[]).map(Number);
};
const complexOf = (expression: string): Complex => {
  const { value } = evaluateExpression(expression);
  if (typeof value === 'number') return { re: value, im: 0 };
  if (typeof value === 'object' && 're' in value) return value;
  throw new Error('no complex number');
};

function expectClose(found: number, wanted: number, relative = 1e-10, absolute = 1e-12): void {
  expect(Math.abs(found - wanted)).toBeLessThanOrEqual(Math.max(relative * Math.abs(wanted), absolute));
}

const draw = seeded(20_260);
const digits = (low: number, high: number): string => draw(low, high).toFixed(4);
const amplitude = (size: number): string => `(${digits(-size, size)} + ${digits(0, size)}*i)`;

/** Random states of one mode, of every sort. */
function states(count: number): string[] {
  const pure = (): string =>
    [
      `fock(${String(Math.floor(draw(0, 5)))})`,
      `coherent(${amplitude(1.2)})`,
      `squeezed(${digits(0, 0.7)}, ${digits(0, 6)})`,
      `cat(${digits(0.3, 1.5)}, ${digits(0, 3)})`,
      `displaced(squeezed(${digits(0, 0.6)}, ${digits(0, 6)}), ${amplitude(1)})`,
      `photonSubtracted(squeezed(${digits(0.2, 0.6)}))`,
      `(coherent(${amplitude(1)}) + ${digits(0.2, 1)}*fock(2))`,
    ][Math.floor(draw(0, 7))] ?? 'vacuum()';
  const mixed = (): string =>
    [
      `thermal(${digits(0, 1)})`,
      `lose(${pure()}, ${digits(0.2, 0.95)})`,
      `amplify(${pure()}, ${digits(1, 1.6)}, ${digits(0, 0.4)})`,
      `damp(${pure()}, ${digits(0.1, 1)}, ${digits(0.1, 1)}, ${digits(0, 0.5)}, ${digits(0, 3)})`,
      `dephased(${pure()}, ${digits(0, 1)})`,
    ][Math.floor(draw(0, 5))] ?? 'thermal(1)';
  return Array.from({ length: count }, (_, index) => (index % 2 === 0 ? pure() : mixed()));
}

describe('physical laws', () => {
  it.each(states(24))('%s: probabilities are positive and add to 1, and purity is at most 1', (state) => {
    const p = list(`photonDistribution(${state}, 90)`);
    expect(Math.min(...p)).toBeGreaterThanOrEqual(-1e-15);
    expectClose(
      p.reduce((sum, each) => sum + each, 0),
      1,
      1e-9,
    );
    const purity = real(`purity(${state})`);
    expect(purity).toBeGreaterThan(0);
    expect(purity).toBeLessThanOrEqual(1 + 1e-12);
  });

  it.each(states(16))('%s: no quadratures break the uncertainty bound', (state) => {
    const { value } = evaluateExpression(`covariance(${state})`);
    const [[xx, xp], [, pp]] = value as unknown as [[number, number], [number, number]];
    expect(xx * pp - xp * xp).toBeGreaterThanOrEqual(0.25 - 1e-12);
  });

  it.each(states(16))('%s: losses and amplifiers change ⟨n⟩ as they must', (state) => {
    const [eta, gain, nbar] = [digits(0.1, 1), digits(1, 2), digits(0, 0.6)];
    const mean = real(`meanPhotons(${state})`);
    expectClose(real(`meanPhotons(lose(${state}, ${eta}))`), Number(eta) * mean);
    const after = Number(gain) * mean + (Number(gain) - 1) * (1 + Number(nbar));
    expectClose(real(`meanPhotons(amplify(${state}, ${gain}, ${nbar}))`), after);
  });

  it.each(states(12))('%s: two losses are one, and a gain does not commute with a loss', (state) => {
    for (const figure of ['parity', 'g2', 'purity']) {
      if (figure === 'g2' && real(`meanPhotons(${state})`) < 1e-6) continue;
      expectClose(real(`${figure}(lose(lose(${state}, 0.8), 0.5))`), real(`${figure}(lose(${state}, 0.4))`), 1e-9);
    }
    // ⟨n⟩: η(G⟨n⟩ + G − 1) after, Gη⟨n⟩ + G − 1 before.
    const mean = real(`meanPhotons(${state})`);
    expectClose(real(`meanPhotons(lose(amplify(${state}, 1.5), 0.6))`), 0.6 * (1.5 * mean + 0.5));
    expectClose(real(`meanPhotons(amplify(lose(${state}, 0.6), 1.5))`), 0.9 * mean + 0.5);
  });

  it.each(states(8))('%s: the Wigner function along p is the density of x', (state) => {
    const x = digits(-1.5, 1.5);
    let sum = 0;
    for (let k = -90; k <= 90; k++) sum += real(`wigner(${state}, ${x}, ${String(k / 10)})`) / 10;
    expectClose(sum, real(`quadratureDensity(${state}, ${x}, 0)`), 1e-8, 1e-9);
  });

  it.each(states(10))('%s: a splitter keeps quanta, and undoes itself', (state) => {
    const joint = `product(${state}, fock(1))`;
    const [transmittance, phi] = [digits(0.1, 0.9), digits(0, 6)];
    const split = `beamSplitter(${joint}, ${transmittance}, ${phi})`;
    const sum = real(`meanPhotons(output(${split}, 1))`) + real(`meanPhotons(output(${split}, 2))`);
    expectClose(sum, real(`meanPhotons(${state})`) + 1);
    const back = `beamSplitter(${split}, ${transmittance}, ${phi} + pi)`;
    expectClose(real(`jointProbability(${back}, 1, 1)`), real(`jointProbability(${joint}, 1, 1)`), 1e-9);
  });

  it.each(states(60))('%s: two methods agree to nine digits', (state) => {
    const figures = ['meanPhotons', 'parity', 'purity', 'amplitude', 'covariance'].map((name) => `${name}(${state})`);
    figures.push(`photonProbability(${state}, 2)`, `husimi(${state}, 0.4 + 0.3*i)`, `wigner(${state}, 0.3, -0.4)`);
    for (const figure of figures) {
      for (const { agreesTo } of evaluateExpression(figure).figures) {
        if (agreesTo !== undefined) expect(agreesTo).toBeGreaterThanOrEqual(9);
      }
    }
  });
});

describe('common practice, no source', () => {
  const twice = (joint: string, gain: number): string =>
    `amplify(amplify(${joint}, 1, ${String(gain)}), 2, ${String(gain)})`;

  it('two amplifiers with nothing, or one quantum known to be in one path, make no fringes', () => {
    expect(real(`visibility(${twice('ket(0, 0)', 5)})`)).toBe(0);
    expect(real(`visibility(${twice('ket(1, 0)', 5)})`)).toBe(0);
  });

  it.each([1.001, 1.5, 4, 100, 1e6])('one shared quantum amplified %f times has visibility G/(3G − 2)', (gain) => {
    expectClose(real(`visibility(${twice('(ket(1, 0) + ket(0, 1))/sqrt(2)', gain)})`), gain / (3 * gain - 2));
  });

  it('coherent states stay coherent under damping and not under amplification', () => {
    expectClose(real('purity(damp(coherent(1.3), 1, 0.7))'), 1);
    expectClose(real('fidelity(damp(coherent(1.3), 1, 0.7), coherent(1.3*exp(-0.35)))'), 1);
    expect(real('purity(invert(coherent(1.3), 1, 0.7))')).toBeLessThan(0.5);
  });

  it('the amplified state turns the other way', () => {
    const damped = complexOf('amplitude(damp(coherent(1), 0.5, 1, 0, 0.8))');
    const inverted = complexOf('amplitude(invert(coherent(1), 0.5, 1, 0, 0.8))');
    expectClose(Math.atan2(damped.im, damped.re), -0.8);
    expectClose(Math.atan2(inverted.im, inverted.re), 0.8);
  });

  it('quanta are conserved with the damped bath, their difference with the inverted one', () => {
    const bath = '[1.7, 1.9, 2.1, 2.3], [0.1, 0.2, 0.15, 0.1]';
    expect(Math.hypot(...Object.values(complexOf(`bathAmplitude(3, 2, ${bath})`)))).toBeLessThanOrEqual(1);
    expect(Math.hypot(...Object.values(complexOf(`invertedBathAmplitude(3, 2, ${bath})`)))).toBeGreaterThanOrEqual(1);
  });

  it('photons that differ in nothing leave a balanced splitter together', () => {
    // C. K. Hong, Z. Y. Ou and L. Mandel, Phys. Rev. Lett. 59 (1987) 2044.
    expectClose(real('coincidence(beamSplitter(ket(1, 1), 0.5))'), 0);
    expectClose(real('jointProbability(beamSplitter(ket(1, 1), 0.5), 2, 0)'), 0.5);
  });
});

describe('published values', () => {
  it('the negativity of one photon is 4/√e − 2', () => {
    // A. Kenfack and K. Życzkowski, J. Opt. B 6 (2004) 396.
    expectClose(real('wignerNegativity(fock(1))'), 4 / Math.sqrt(Math.E) - 2, 1e-9);
  });

  // M. Abramowitz and I. A. Stegun, Handbook of Mathematical Functions, tables 9.1, 9.8 and 26.7 and 22; from memory,
  // to the digits that are given.
  it.each([
    ['J_0(1)', besselJ(0, 1), 0.7651976866],
    ['J_1(1)', besselJ(1, 1), 0.4400505857],
    ['J_0(10)', besselJ(0, 10), -0.2459357645],
    ['I_0(1)', besselI(0, 1), 1.2660658778],
    ['I_1(1)', besselI(1, 1), 0.565159104],
    ['Poisson, mean 1, n = 2', poisson(2, 1), 0.1839397206],
    ['Poisson, mean 5, n = 5', poisson(5, 5), 0.1754673698],
  ])('%s', (_, found, tabled) => {
    expect(Math.abs(found - tabled)).toBeLessThanOrEqual(0.5e-10);
  });

  it('polynomials in closed form', () => {
    // DLMF 18.5.17 and 18.5.18.
    expect(laguerre(3, 0, 2)).toBeCloseTo((-8 + 9 * 4 - 18 * 2 + 6) / 6, 12);
    expect(hermite(4, 1.5)).toBeCloseTo(16 * 1.5 ** 4 - 48 * 1.5 ** 2 + 12, 10);
  });
});
