import type { AnswerSpecification } from '@shared/answer-forms';
import { add, conjugate, modulus, multiply, zero } from '@shared/reading/complex';
import { printNumber } from '@shared/reading/print';
import type { ReadingOf } from '@shared/reading/reading';
import { amplitudesOf } from '@shared/reading/superposition';
import type { StateAmplitude } from '../keys/state-components';
import { asState, KeyProblem, type ComputedKey, type StateKey } from './key-value';
import { matched, type Match } from './match';

const modes = (count: number): string => (count === 1 ? 'one mode' : `${count} modes`);

/**
 * Fidelity of the written state with the key, both normalised: |⟨k|a⟩|² for a pure key, ⟨a|ρ|a⟩ for a mixed one.
 */
export function fidelityWithKey(reading: ReadingOf<'state'>, key: StateKey): number {
  const amplitude = amplitudesOf(reading);
  const norm = reading.norm ** 2;
  if ('amplitudes' in key) {
    let overlap = zero;
    let weight = 0;
    for (const { photons, re, im } of key.amplitudes) {
      overlap = add(overlap, multiply({ re, im: -im }, amplitude(photons)));
      weight += re * re + im * im;
    }
    if (!(weight > 0)) throw new KeyProblem('The key is the zero vector.');
    return modulus(overlap) ** 2 / (norm * weight);
  }
  if ('kets' in key) return fidelityWithEnsemble(reading, key.kets);
  let sum = 0;
  let trace = 0;
  for (const { row, column, re, im } of key.elements) {
    const part = multiply(multiply(conjugate(amplitude(row)), { re, im }), amplitude(column));
    sum += part.re;
    if (row.join() === column.join()) trace += re;
  }
  if (!(trace > 0)) throw new KeyProblem('The key is no state: its trace is not positive.');
  return sum / (norm * trace);
}

/** ⟨a|ρ|a⟩ for ρ = Σ|k⟩⟨k| of kets whose norms are their weights. */
function fidelityWithEnsemble(reading: ReadingOf<'state'>, kets: readonly (readonly StateAmplitude[])[]): number {
  const amplitude = amplitudesOf(reading);
  let sum = 0;
  let trace = 0;
  for (const ket of kets) {
    let overlap = zero;
    for (const { photons, re, im } of ket) {
      overlap = add(overlap, multiply({ re, im: -im }, amplitude(photons)));
      trace += re * re + im * im;
    }
    sum += modulus(overlap) ** 2;
  }
  if (!(trace > 0)) throw new KeyProblem('The key is no state: its trace is not positive.');
  return sum / (reading.norm ** 2 * trace);
}

/** Compares a state by fidelity, up to global phase and normalisation. */
export function compareState(
  reading: ReadingOf<'state'>,
  key: ComputedKey,
  part: Extract<AnswerSpecification, { form: 'state' }>,
): Match {
  const state = asState(key.value);
  if (reading.modes !== state.modes) {
    return matched(false, {
      reason: `The answer is a state of ${modes(reading.modes)}, the key one of ${modes(state.modes)}.`,
    });
  }
  const fidelity = fidelityWithKey(reading, state);
  if (fidelity >= part.minimumFidelity - 1e-12) return matched(true);
  return matched(false, {
    reason: `The fidelity with the key is ${printNumber(fidelity, 4)}; ${printNumber(part.minimumFidelity)} is asked for.`,
  });
}
