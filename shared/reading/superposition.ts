import {
  add,
  conjugate,
  exp,
  isFiniteComplex,
  modulus,
  multiply,
  negate,
  one,
  real,
  zero,
  type Complex,
} from './complex';
import type { CoherentComponent, KetComponent } from './reading';

/** A state that is written down: a sum of number kets and, for one mode, of coherent states. Not normalised. */
export interface Superposition {
  readonly modes: number;
  readonly kets: readonly KetComponent[];
  readonly coherent: readonly CoherentComponent[];
}

/** ⟨α|β⟩ = exp(−|α|²/2 − |β|²/2 + α*β). */
export function coherentOverlap(alpha: Complex, beta: Complex): Complex {
  const cross = multiply(conjugate(alpha), beta);
  const sizes = (modulus(alpha) ** 2 + modulus(beta) ** 2) / 2;
  return exp({ re: cross.re - sizes, im: cross.im });
}

const logarithmsOfFactorials: number[] = [0];

/** ln n!, from a table that grows as it is used. */
function logFactorial(n: number): number {
  for (let k = logarithmsOfFactorials.length; k <= n; k += 1) {
    logarithmsOfFactorials.push((logarithmsOfFactorials[k - 1] ?? 0) + Math.log(k));
  }
  return logarithmsOfFactorials[n] ?? 0;
}

/** ⟨n|α⟩ = exp(−|α|²/2) αⁿ/√n!, through logarithms so that nothing overflows; n at most 16,383. */
export function coherentAmplitude(n: number, alpha: Complex): Complex {
  const size = modulus(alpha);
  if (size === 0) return n === 0 ? one : zero;
  const magnitude = Math.exp(-(size ** 2) / 2 + n * Math.log(size) - logFactorial(n) / 2);
  if (alpha.im === 0) return real(alpha.re < 0 && n % 2 === 1 ? -magnitude : magnitude);
  const phase = n * Math.atan2(alpha.im, alpha.re);
  return { re: magnitude * Math.cos(phase), im: magnitude * Math.sin(phase) };
}

/** ⟨photons|ψ⟩ of a sum. */
export function amplitudesOf(state: Superposition): (photons: readonly number[]) => Complex {
  const kets = new Map(state.kets.map((ket) => [ket.photons.join(), ket.amplitude]));
  return (photons) => {
    let sum = kets.get(photons.join()) ?? zero;
    for (const { alpha, amplitude } of state.coherent) {
      sum = add(sum, multiply(coherentAmplitude(photons[0] ?? 0, alpha), amplitude));
    }
    return sum;
  };
}

/** ⟨a|b⟩ of two sums with as many modes. */
export function overlap(a: Superposition, b: Superposition): Complex {
  let sum = zero;
  const amplitudes = new Map(b.kets.map((ket) => [ket.photons.join(), ket.amplitude]));
  for (const ket of a.kets) {
    const other = amplitudes.get(ket.photons.join());
    if (other) sum = add(sum, multiply(conjugate(ket.amplitude), other));
    for (const state of b.coherent) {
      const part = multiply(coherentAmplitude(ket.photons[0] ?? 0, state.alpha), state.amplitude);
      sum = add(sum, multiply(conjugate(ket.amplitude), part));
    }
  }
  for (const state of a.coherent) {
    for (const ket of b.kets) {
      const part = multiply(conjugate(coherentAmplitude(ket.photons[0] ?? 0, state.alpha)), ket.amplitude);
      sum = add(sum, multiply(conjugate(state.amplitude), part));
    }
    for (const other of b.coherent) {
      const part = multiply(coherentOverlap(state.alpha, other.alpha), other.amplitude);
      sum = add(sum, multiply(conjugate(state.amplitude), part));
    }
  }
  return sum;
}

/** The norm √⟨ψ|ψ⟩. */
export const normOf = (state: Superposition): number => Math.sqrt(Math.max(0, overlap(state, state).re));

/** The state times a number. */
export function scaled(state: Superposition, factor: Complex): Superposition {
  const times = <Part extends { readonly amplitude: Complex }>(part: Part): Part => ({
    ...part,
    amplitude: multiply(part.amplitude, factor),
  });
  return { modes: state.modes, kets: state.kets.map(times), coherent: state.coherent.map(times) };
}

/** The sum of two states, equal components gathered. */
export function added(a: Superposition, b: Superposition): Superposition {
  const kets = new Map<string, KetComponent>();
  for (const ket of [...a.kets, ...b.kets]) {
    const seen = kets.get(ket.photons.join());
    kets.set(ket.photons.join(), seen ? { ...ket, amplitude: add(seen.amplitude, ket.amplitude) } : ket);
  }
  const coherent = new Map<string, CoherentComponent>();
  for (const state of [...a.coherent, ...b.coherent]) {
    const name = `${state.alpha.re},${state.alpha.im}`;
    const seen = coherent.get(name);
    coherent.set(name, seen ? { ...state, amplitude: add(seen.amplitude, state.amplitude) } : state);
  }
  return { modes: a.modes, kets: [...kets.values()], coherent: [...coherent.values()] };
}

/** The joint state of two sums of number kets: |1⟩|0⟩ is |1,0⟩. */
export function joined(a: Superposition, b: Superposition): Superposition {
  const kets = a.kets.flatMap((first) =>
    b.kets.map((second) => ({
      photons: [...first.photons, ...second.photons],
      amplitude: multiply(first.amplitude, second.amplitude),
    })),
  );
  return { modes: a.modes + b.modes, kets, coherent: [] };
}

/** A number ket. */
export const ketState = (photons: readonly number[]): Superposition => ({
  modes: photons.length,
  kets: [{ photons, amplitude: one }],
  coherent: [],
});

/** A coherent state. */
export const coherentState = (alpha: Complex): Superposition => ({
  modes: 1,
  kets: [],
  coherent: [{ alpha, amplitude: one }],
});

/** The normalised |α⟩ + e^{iθ}|−α⟩, or undefined where it vanishes. */
export function catState(alpha: Complex, theta: Complex): Superposition | undefined {
  const phase = exp(multiply({ re: 0, im: 1 }, theta));
  const sum = added(coherentState(alpha), scaled(coherentState(negate(alpha)), phase));
  const norm = normOf(sum);
  return norm > 1e-12 && isFiniteComplex(phase) ? scaled(sum, real(1 / norm)) : undefined;
}

/** Whether every amplitude is finite. */
export const isFiniteState = (state: Superposition): boolean =>
  [...state.kets, ...state.coherent].every(({ amplitude }) => isFiniteComplex(amplitude)) &&
  state.coherent.every(({ alpha }) => isFiniteComplex(alpha));
