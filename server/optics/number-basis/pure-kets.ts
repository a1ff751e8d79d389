import { abs2, conjugate, multiply, phase, times, type Complex } from '../complex';
import { poisson } from '../special/distributions';
import type { State } from '../state';
import type { NumberKet } from './one-mode';

const EPS = 2 ** -52;

export function coherentKet(alpha: Complex, { levels, outside }: { levels: number; outside: number }): NumberKet {
  const mean = abs2(alpha);
  const angle = Math.atan2(alpha.im, alpha.re);
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  for (let n = 0; n < levels; n++) {
    const size = Math.sqrt(poisson(n, mean));
    const turn = phase(angle * n);
    re[n] = size * turn.re;
    im[n] = size * turn.im;
  }
  return { kind: 'ket', levels, re, im, noise: 0, outside };
}

export function squeezedKet(
  r: number,
  direction: Complex,
  { levels, outside }: { levels: number; outside: number },
): NumberKet {
  const angle = Math.atan2(-direction.im, -direction.re);
  const tau = Math.tanh(r);
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let size = 1 / Math.sqrt(Math.cosh(r));
  for (let k = 0; 2 * k < levels; k++) {
    const turn = phase(angle * k);
    re[2 * k] = size * turn.re;
    im[2 * k] = size * turn.im;
    size *= tau * Math.sqrt((2 * k + 1) / (2 * k + 2));
  }
  return { kind: 'ket', levels, re, im, noise: 0, outside };
}

/**
 * D(α)S(ζ)|0⟩ from a(μ) + ν a† = β on it, without a matrix.
 *
 * Formula: μ√(n+1) ψ_{n+1} = β ψ_n − ν√n ψ_{n−1} with μ = cosh r, ν = e^{iφ} sinh r, β = μα + να*; the phase of ψ_0 is
 * that of exp(−e^{iφ} tanh r α*²/2).
 */
export function displacedSqueezedKet(
  alpha: Complex,
  { r, direction }: Extract<State, { readonly kind: 'squeezed' }>,
  { levels, outside }: { levels: number; outside: number },
): NumberKet {
  const mu = Math.cosh(r);
  const nu = times(direction, Math.sinh(r));
  const turned = multiply(nu, conjugate(alpha));
  const beta = { re: mu * alpha.re + turned.re, im: mu * alpha.im + turned.im };
  const start = multiply(times(direction, -Math.tanh(r) / 2), multiply(conjugate(alpha), conjugate(alpha)));
  const re = new Float64Array(levels);
  const im = new Float64Array(levels);
  let [beforeRe, beforeIm] = [0, 0];
  let { re: hereRe, im: hereIm } = phase(start.im);
  for (let n = 0; n < levels; n++) {
    re[n] = hereRe;
    im[n] = hereIm;
    const [root, below] = [1 / (mu * Math.sqrt(n + 1)), Math.sqrt(n)];
    const nextRe = (beta.re * hereRe - beta.im * hereIm - below * (nu.re * beforeRe - nu.im * beforeIm)) * root;
    const nextIm = (beta.re * hereIm + beta.im * hereRe - below * (nu.re * beforeIm + nu.im * beforeRe)) * root;
    [beforeRe, beforeIm, hereRe, hereIm] = [hereRe, hereIm, nextRe, nextIm];
    if (Math.abs(hereRe) + Math.abs(hereIm) < 1e140) continue;
    for (let k = 0; k <= n; k++) {
      re[k]! *= 1e-140;
      im[k]! *= 1e-140;
    }
    beforeRe *= 1e-140;
    beforeIm *= 1e-140;
    hereRe *= 1e-140;
    hereIm *= 1e-140;
  }
  let weight = 0;
  for (let n = 0; n < levels; n++) weight += re[n]! ** 2 + im[n]! ** 2;
  const scale = 1 / Math.sqrt(weight);
  for (let n = 0; n < levels; n++) {
    re[n]! *= scale;
    im[n]! *= scale;
  }
  return { kind: 'ket', levels, re, im, noise: 4 * EPS, outside };
}

export function catKet(alpha: Complex, theta: number, size: { levels: number; outside: number }): NumberKet {
  const base = coherentKet(alpha, size);
  const mean = abs2(alpha);
  const half = Math.cos(theta / 2);
  const halfSine = Math.sin(theta / 2);
  const norm = 4 * half * half + 2 * Math.cos(theta) * Math.expm1(-2 * mean);
  const scale = 1 / Math.sqrt(norm);
  // 1 ± e^{iθ} = 2 cos(θ/2) e^{iθ/2} or −2i sin(θ/2) e^{iθ/2}.
  const turn = phase(theta / 2);
  const even = { re: 2 * half * turn.re * scale, im: 2 * half * turn.im * scale };
  const odd = { re: 2 * halfSine * turn.im * scale, im: -2 * halfSine * turn.re * scale };
  const re = new Float64Array(base.levels);
  const im = new Float64Array(base.levels);
  for (let n = 0; n < base.levels; n++) {
    const factor = n % 2 === 0 ? even : odd;
    re[n] = base.re[n]! * factor.re - base.im[n]! * factor.im;
    im[n] = base.re[n]! * factor.im + base.im[n]! * factor.re;
  }
  return { ...base, re, im };
}
