import { describe, expect, it } from 'vitest';
import { judgeLine, verdictOf, type LinePart } from './testing/judge-line';

const right = 'right 1';
const wrong = 'wrong 0';
const unreadable = 'unreadable 0';

function formulaWith(key: string, variables: LinePart, more: LinePart = {}): LinePart {
  return { form: 'formula', key, variables, tolerance: { relative: 1e-6 }, ...more };
}

function judged(
  key: string,
  variables: LinePart,
  cases: readonly (readonly [text: string, verdict: string])[],
  more: LinePart = {},
): void {
  describe(`a key of ${key}`, () => {
    it.each(cases)('%s: %s', (text, verdict) =>
      expect(verdictOf(formulaWith(key, variables), text, more)).toBe(verdict),
    );
  });
}

judged('G*(G-1)', { G: [1, 9] }, [
  ['G(G-1)', right],
  ['(G-1)G', right],
  ['G (G - 1)', right],
  ['G*(G-1)', right],
  ['G·(G−1)', right],
  ['G×(G−1)', right],
  ['G^2 - G', right],
  ['G² - G', right],
  ['G**2 - G', right],
  ['G^{2} - G', right],
  ['G\\left(G-1\\right)', right],
  ['G \\cdot (G-1)', right],
  ['G[G-1]', right],
  ['n = G(G-1)', right],
  ['⟨n⟩ = G(G-1)', right],
  ['0.5 G (2G - 2)', right],
  ['½ G (2G - 2)', right],
  ['(G^3 - G^2)/G', right],
  ['|G|(G-1)', right],
  ['sqrt(G^2)(G-1)', right],
  ['exp(ln(G))(G-1)', right],
  ['(G^4-G^3)/G^2', right],
  ['G(G+1)', wrong],
  ['G', wrong],
  ['2', wrong],
  ['G(G-1) + 0.001 i', wrong],
  ['1.00001 G(G-1)', wrong],
  ['g(g-1)', unreadable],
  ['H(H-1)', unreadable],
  ['G(G-1', unreadable],
  ['G(G-1) MHz', unreadable],
  ['G(G-1) = 3', unreadable],
  ['|G>', unreadable],
  ['G; G', unreadable],
  ['foo(G)', unreadable],
  ['GG', unreadable],
  ['G G - G', right],
  ['', 'unanswered 0'],
]);

judged('alpha*exp(-(kappa/2 + i*omega)*t)', { alpha: [0.5, 2], kappa: [0.1, 1], omega: [0.5, 3], t: [0, 3] }, [
  ['alpha*exp(-(kappa/2+i*omega)*t)', right],
  ['alpha exp(-(kappa/2 + i omega) t)', right],
  ['α e^{-(κ/2 + iω)t}', right],
  ['α e^{-(κ/2 + i ω) t}', right],
  ['\\alpha e^{-(\\kappa/2 + i\\omega) t}', right],
  ['\\alpha \\exp\\left(-\\frac{\\kappa t}{2}\\right) e^{-i \\omega t}', right],
  ['\\alpha\\, e^{-\\kappa t/2 - i\\omega t}', right],
  ['e^{-i ω t} α e^{-κ t/2}', right],
  ['alpha*exp(-kappa*t/2)*(cos(omega*t)-i*sin(omega*t))', right],
  ['α e^(-κt/2) e^(-iωt)', right],
  ['α/e^((κ/2+iω)t)', right],
  ['alpha e^-(kappa t/2 + i omega t)', right],
  ['α e^{-(κ/2 - iω)t}', wrong],
  ['α e^{-(κ + iω)t}', wrong],
  ['α e^{-κt/2}', wrong],
  ['α e^{-(κ/2 + jω)t}', unreadable],
  ['α e^{-(κ/2 + iν)t}', unreadable],
]);

judged('exp(-nbar)*nbar^n/n!', { nbar: [0.1, 6], n: { integers: [0, 6] } }, [
  ['exp(-nbar)*nbar^n/n!', right],
  ['e^(-nbar) nbar^n / n!', right],
  ['e^{-\\bar n} \\bar n^n/n!', right],
  ['e^{-n̄} n̄^n/n!', right],
  ['e^{-\\bar{n}} \\bar{n}^{n} / n!', right],
  ['\\frac{\\bar{n}^n}{n!} e^{-\\bar{n}}', right],
  ['n̄ⁿ e^(−n̄)/n!', right],
  ['nbar^n/(n! e^nbar)', right],
  ['nbar^n exp(-nbar)/gamma(n+1)', right],
  ['nbar^n exp(-nbar)/n', wrong],
  ['nbar^n/(1+nbar)^(n+1)', wrong],
]);

judged('exp(-gamma*t)', { gamma: [0.1, 2], t: [0, 3] }, [
  ['exp(-gamma t)', right],
  ['e^{-γt}', right],
  ['e^{-\\gamma t}', right],
  ['exp(-gamma(t))', right],
  ['exp(-gamma*t)', right],
  ['exp(gamma t)', wrong],
]);

judged('gamma(x)', { x: [1, 4] }, [
  ['gamma(x)', right],
  ['Γ(x)', unreadable],
  ['(x-1)!', right],
]);

judged('kappa_0*T', { kappa_0: [1, 2], T: [0, 1] }, [
  ['kappa_0 T', right],
  ['κ_0 T', right],
  ['κ₀ T', right],
  ['\\kappa_{0} T', right],
  ['\\kappa_0 T', right],
  ['T(kappa_0)', right],
]);

judged('1/2*x', { x: [1, 2] }, [
  ['1/2 x', right],
  ['x/2', right],
  ['½x', right],
  ['0.5x', right],
  ['0,5 x', right],
  ['\\frac12 x', unreadable],
  ['\\frac{1}{2}x', right],
  ['1/(2x)', wrong],
]);

judged('1/(2*x)', { x: [1, 2] }, [
  ['1/(2x)', right],
  ['x^-1/2', right],
  ['1/2/x', right],
  ['(2x)^-1', right],
]);

judged('sin(x)^2', { x: [0, 3] }, [
  ['sin(x)^2', right],
  ['sin²(x)', right],
  ['sin^2(x)', right],
  ['\\sin^2(x)', right],
  ['1 - cos(x)^2', right],
  ['(1 - cos(2x))/2', right],
  ['sin(x)sin(x)', right],
  ['sin(x^2)', wrong],
]);

judged('phi', { phi: [0, 3] }, [
  ['\\varphi', right],
  ['φ', right],
  ['ϕ', right],
  ['\\phi', right],
]);

judged('tau*eta*mu', { tau: [1, 2], eta: [0, 1], mu: [1, 2] }, [
  ['τημ', right],
  ['τ η μ', right],
  ['\\tau\\eta\\mu', right],
  ['τ·η·µ', right],
]);

describe('where a formula is undefined', () => {
  it('is wrong where the key is defined, and the point is shown', () => {
    const checked = judgeLine(formulaWith('G/(3*G-2)', { G: [1, 50] }), 'sqrt(5-G)/sqrt(5-G)*G/(3G-2)');
    expect(checked).toMatchObject({ verdict: 'right' });
    const pole = judgeLine(formulaWith('1', { n: { integers: [0, 6] } }), '(n-3)/(n-3)');
    expect(pole).toMatchObject({
      verdict: 'wrong',
      problem: 'The formula is undefined where the key is not: at n = 3 the key is 1.',
      point: { at: { n: 3 }, answer: null, key: { re: 1, im: 0 } },
    });
  });

  it('is compared at other points where both are undefined', () => {
    expect(verdictOf(formulaWith('1/(n-3)', { n: { integers: [0, 6] } }), '1/(n-3)')).toBe(right);
    expect(verdictOf(formulaWith('1/(n-3)', { n: { integers: [0, 6] } }), '1/(n-2)')).toBe(wrong);
  });

  it('shows the marker the first point where the values differ', () => {
    const checked = judgeLine(formulaWith('G/(3*G-2)', { G: [1, 50] }), 'G/(3G+2)');
    expect(checked).toMatchObject({ verdict: 'wrong', relation: 'the key with −G in place of G' });
    if (!('point' in checked) || !checked.point) throw new Error('The point is missing.');
    const gain = checked.point.at['G'] ?? NaN;
    expect(gain).toBeGreaterThan(1);
    expect(gain).toBeLessThan(50);
    expect(checked.point.answer?.re).toBeCloseTo(gain / (3 * gain + 2), 12);
    expect(checked.point.key?.re).toBeCloseTo(gain / (3 * gain - 2), 12);
  });
});

describe('keys of formulas', () => {
  it('may use givens, over which variables win', () => {
    const part = formulaWith('eta*x', { x: [1, 2] });
    expect(verdictOf(part, '0.5x', { givens: { eta: 0.5, x: 7 } })).toBe(right);
  });

  it('may ask figures of states', () => {
    const part = formulaWith('g2(lose(thermal(nbar), eta))', { nbar: [0.5, 2], eta: [0.1, 1] });
    expect(verdictOf(part, '2')).toBe(right);
    expect(verdictOf(part, '1 + 1')).toBe(right);
    expect(verdictOf(part, '1')).toBe(wrong);
    const gain = formulaWith('visibility(amplify(amplify((ket(1,0)+ket(0,1))/sqrt(2), 1, G), 2, G))', { G: [1, 9] });
    expect(verdictOf(gain, 'G/(3G-2)')).toBe(right);
  });

  it('say what is wrong with them', () => {
    expect(verdictOf(formulaWith('foo*x', { x: [1, 2] }), 'x')).toMatch(/^error: .*foo/);
    expect(verdictOf(formulaWith('x MHz', { x: [1, 2] }), 'x')).toMatch(/^error: .*unit/);
  });

  it('have slips of their own', () => {
    const part = formulaWith(
      'G/(3*G-2)',
      { G: [1, 50] },
      { slips: [{ expression: 'G/(2*G-1)', feedback: 'One amplifier only.', fraction: 0.25 }] },
    );
    expect(verdictOf(part, 'G/(2G-1)')).toBe('slip 0.25 #0');
    expect(verdictOf(part, 'G/(3G-2)')).toBe(right);
  });
});
