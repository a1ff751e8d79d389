import type { Complex } from './complex';
import { OpticsError } from './optics-error';

/** Most multiplications spent on one amplitude: about a second. */
const MOST_WORK = 4e8;

interface BathAmplitude {
  /** u(t). */
  readonly amplitude: Complex;
  /** Σ|v_k(t)|². */
  readonly bathWeight: number;
}

/**
 * First row of e^{−iMt} for the arrow matrix M = [[w₀, λ], [sλ, w]]: by symmetry up to signs it is the first
 * column's transpose, so one vector is carried. Taylor steps of size ‖M‖h ≤ 1 after the common frequency is
 * turned off; nothing is cut, the series goes on until a term no longer counts.
 */
function evolve(
  functionName: string,
  t: number,
  first: number,
  frequencies: readonly number[],
  couplings: readonly number[],
  sign: 1 | -1,
): BathAmplitude {
  const size = frequencies.length;
  let low = first;
  let high = first;
  for (const w of frequencies) {
    low = Math.min(low, w);
    high = Math.max(high, w);
  }
  const centre = (low + high) / 2;
  const coupling = Math.sqrt(couplings.reduce((sum, c) => sum + c * c, 0));
  const norm = (high - low) / 2 + coupling;
  const steps = Math.max(1, Math.ceil(norm * Math.abs(t)));
  if (!(steps * (size + 1) * 20 <= MOST_WORK)) {
    throw new OpticsError(
      'this time is too long for this bath: the time times the spread of the frequencies times their number is too large',
      { functionName, argument: 'time', argumentIndex: 0, given: t },
    );
  }
  const h = t / steps;
  const re = new Float64Array(size + 1);
  const im = new Float64Array(size + 1);
  re[0] = 1;
  const termRe = new Float64Array(size + 1);
  const termIm = new Float64Array(size + 1);
  const detuning = Float64Array.from([first, ...frequencies], (w) => w - centre);
  const links = Float64Array.from([0, ...couplings]);
  for (let step = 0; step < steps; step++) {
    termRe.set(re);
    termIm.set(im);
    for (let order = 1; order < 60; order++) {
      // The next term is −i h/order times the transpose of M times the last one.
      const factor = h / order;
      let sumRe = detuning[0]! * termRe[0]!;
      let sumIm = detuning[0]! * termIm[0]!;
      const headRe = termRe[0]!;
      const headIm = termIm[0]!;
      let largest = 0;
      for (let k = 1; k <= size; k++) {
        const link = links[k]!;
        const tailRe = termRe[k]!;
        const tailIm = termIm[k]!;
        sumRe += sign * link * tailRe;
        sumIm += sign * link * tailIm;
        const nextRe = detuning[k]! * tailRe + link * headRe;
        const nextIm = detuning[k]! * tailIm + link * headIm;
        termRe[k] = factor * nextIm;
        termIm[k] = -factor * nextRe;
        largest = Math.max(largest, Math.abs(termRe[k]!), Math.abs(termIm[k]!));
        re[k]! += termRe[k]!;
        im[k]! += termIm[k]!;
      }
      termRe[0] = factor * sumIm;
      termIm[0] = -factor * sumRe;
      largest = Math.max(largest, Math.abs(termRe[0]), Math.abs(termIm[0]));
      re[0] += termRe[0];
      im[0]! += termIm[0];
      if (largest < 1e-18) break;
    }
  }
  const turn = centre * t;
  const amplitude = {
    re: re[0] * Math.cos(turn) + im[0]! * Math.sin(turn),
    im: im[0]! * Math.cos(turn) - re[0] * Math.sin(turn),
  };
  let bathWeight = 0;
  for (let k = 1; k <= size; k++) bathWeight += re[k]! * re[k]! + im[k]! * im[k]!;
  if (!Number.isFinite(amplitude.re) || !Number.isFinite(amplitude.im) || !Number.isFinite(bathWeight)) {
    throw new OpticsError('the amplitude is larger than a number can hold', { functionName });
  }
  return { amplitude, bathWeight };
}

/**
 * An oscillator coupled to a bath of oscillators, exactly.
 *
 * Formula: u(t) of a(t) = u(t) a(0) + Σ v_k(t) b_k(0) for H/ħ = ω a†a + Σ ω_k b_k†b_k + Σ λ_k (a†b_k + a b_k†).
 * @param t time, real
 * @param omega ω, in inverse units of t
 * @param frequencies ω_k, in inverse units of t
 * @param couplings λ_k, in inverse units of t, as many as frequencies
 * @returns u(t) and Σ|v_k|²; |u|² + Σ|v_k|² = 1. Not truncated; error about 1e-15 per unit of ‖H‖t
 * @throws OpticsError where t is too long for the number of modes
 * @example without couplings u(t) = e^{−iωt}
 * Source: linear equations of motion (Weisskopf and Wigner before their approximation).
 */
export function bathAmplitude(
  t: number,
  omega: number,
  frequencies: readonly number[],
  couplings: readonly number[],
): BathAmplitude {
  return evolve('bathAmplitude', t, omega, frequencies, couplings, 1);
}

/**
 * An inverted oscillator coupled to a bath of oscillators, exactly.
 *
 * Formula: u(t) of a(t) = u(t) a(0) + Σ v_k(t) b_k†(0) for H/ħ = −ω a†a + Σ ω_k b_k†b_k + Σ λ_k (a b_k + a†b_k†).
 * @param t time, real
 * @param omega ω, in inverse units of t
 * @param frequencies ω_k, in inverse units of t
 * @param couplings λ_k, in inverse units of t, as many as frequencies
 * @returns u(t) and Σ|v_k|²; |u|² − Σ|v_k|² = 1. Not truncated
 * @throws OpticsError where t is too long for the number of modes, or the amplitude overflows
 * @example without couplings u(t) = e^{+iωt}
 * Source: linear equations of motion.
 */
export function invertedBathAmplitude(
  t: number,
  omega: number,
  frequencies: readonly number[],
  couplings: readonly number[],
): BathAmplitude {
  const inverted = frequencies.map((w) => -w);
  return evolve('invertedBathAmplitude', t, -omega, inverted, couplings, -1);
}
