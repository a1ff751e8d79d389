import { abs, complex, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import type { State } from '../state';
import { StateMemo } from '../state-memo';
import { coefficientTable, LARGEST_TABLE, tableSize } from './coefficients';
import { addConstant, outerToSources, substitute, type Form } from './form';
import { normOfKetForms, sumOfForms, type FormSum } from './form-products';
import { ketForms } from './ket-forms';
import { dropEmptySources, operatorForms, projectBetween, traceOf } from './operator-forms';

/** Complex entries and an estimate of the absolute error of each. */
export interface Entries {
  readonly re: Float64Array;
  readonly im: Float64Array;
  readonly error: Float64Array;
}

/** Whether a state's description is normalised as it is written, so that nothing need be divided by. */
export function isNormalisedAsWritten(state: State, kets: boolean): boolean {
  switch (state.kind) {
    case 'fock':
    case 'coherent':
    case 'thermal':
    case 'squeezed':
    case 'cat':
    case 'twinBeam':
    case 'mixture':
      return true;
    case 'product':
      return isNormalisedAsWritten(state.first, kets) && isNormalisedAsWritten(state.second, kets);
    case 'superposition':
    case 'clicked':
      return false;
    case 'photonAdded':
    case 'photonSubtracted':
    case 'heralded':
      return kets;
    default:
      return isNormalisedAsWritten(state.state, kets);
  }
}

const norms = new StateMemo<{ readonly norm: number; readonly relative: number }>();

/** ⟨ψ|ψ⟩ of a pure state's Gaussians, and its relative error. */
export function ketNorm(state: State): { readonly norm: number; readonly relative: number } {
  if (isNormalisedAsWritten(state, true)) return { norm: 1, relative: ketForms(state).relative };
  let known = norms.get(state);
  if (known === undefined) {
    const { forms, relative } = ketForms(state);
    const own = normOfKetForms(forms);
    known = { norm: own.norm, relative: own.relative + relative };
    norms.set(state, known);
  }
  return known;
}

/** Tr of a state's Gaussians, and its relative error. */
export function operatorNorm(state: State): { readonly norm: number; readonly relative: number } {
  const { relative } = operatorForms(state);
  if (isNormalisedAsWritten(state, false)) return { norm: 1, relative };
  const trace = traceOf(state);
  return { norm: trace.value.re, relative: relative + trace.error / trace.value.re };
}

/** The expectation value that a change of each Gaussian to a number stands for, normalised. */
export function expectation(state: State, change: (form: Form) => Form): FormSum {
  const { norm, relative } = operatorNorm(state);
  const sum = sumOfForms(operatorForms(state).forms.map((form) => dropEmptySources(change(form))));
  const value = { re: sum.value.re / norm, im: sum.value.im / norm };
  return { value, error: sum.error / norm + abs(value) * (relative + 2 ** -51) };
}

/**
 * Amplitudes ⟨n|ψ⟩ of a pure state of one mode for n = 0 … nmax, normalised.
 *
 * @throws MethodDoesNotApply where the state is not a sum of Gaussians
 */
export function ketAmplitudes(state: State, nmax: number): Entries {
  const { norm, relative } = ketNorm(state);
  const scale = 1 / Math.sqrt(norm);
  const re = new Float64Array(nmax + 1);
  const im = new Float64Array(nmax + 1);
  const error = new Float64Array(nmax + 1);
  for (const form of ketForms(state).forms) {
    const ready = { ...outerToSources(form, [nmax]) };
    if (tableSize(ready.sources) > LARGEST_TABLE) throw tooLarge();
    const table = coefficientTable(ready);
    const stride = table.re.length / (nmax + 1);
    for (let n = 0; n <= nmax; n++) {
      const at = n * stride + stride - 1;
      re[n]! += table.re[at]! * scale;
      im[n]! += table.im[at]! * scale;
      error[n]! += (table.error[at]! + 2 ** -53 * Math.hypot(table.re[at]!, table.im[at]!)) * scale;
    }
  }
  for (let n = 0; n <= nmax; n++) error[n]! += (Math.hypot(re[n]!, im[n]!) * relative) / 2;
  return { re, im, error };
}

/** ⟨n,m|ψ⟩ of a pure state of two modes, normalised. */
export function jointAmplitude(state: State, n: number, m: number): FormSum {
  const { norm, relative } = ketNorm(state);
  const scale = 1 / Math.sqrt(norm);
  const sum = sumOfForms(ketForms(state).forms.map((form) => dropEmptySources(outerToSources(form, [n, m]))));
  const value = { re: sum.value.re * scale, im: sum.value.im * scale };
  return { value, error: sum.error * scale + (abs(value) * relative) / 2 };
}

const tooLarge = () => new MethodDoesNotApply('the photon numbers are too large for polynomials times Gaussians');

/** ρ_mn of a state of one mode. */
export function matrixElement(state: State, m: number, n: number): { readonly value: Complex; readonly error: number } {
  if (state.pure) {
    const nmax = Math.max(m, n);
    const psi = ketAmplitudes(state, nmax);
    const value = {
      re: psi.re[m]! * psi.re[n]! + psi.im[m]! * psi.im[n]!,
      im: psi.im[m]! * psi.re[n]! - psi.re[m]! * psi.im[n]!,
    };
    const sizeM = Math.hypot(psi.re[m]!, psi.im[m]!);
    const sizeN = Math.hypot(psi.re[n]!, psi.im[n]!);
    const error = sizeM * psi.error[n]! + sizeN * psi.error[m]! + psi.error[m]! * psi.error[n]!;
    return { value, error: error + 2 ** -52 * sizeM * sizeN };
  }
  return expectation(state, (form) => projectBetween(form, 1, m, n));
}

/** ρ_mn for m, n = 0 … nmax, row by row. */
export function densityBlock(state: State, nmax: number): Entries {
  const side = nmax + 1;
  const re = new Float64Array(side * side);
  const im = new Float64Array(side * side);
  const error = new Float64Array(side * side);
  if (state.pure) {
    const psi = ketAmplitudes(state, nmax);
    for (let m = 0; m < side; m++) {
      for (let n = 0; n < side; n++) {
        const at = m * side + n;
        re[at] = psi.re[m]! * psi.re[n]! + psi.im[m]! * psi.im[n]!;
        im[at] = psi.im[m]! * psi.re[n]! - psi.re[m]! * psi.im[n]!;
        const sizeM = Math.hypot(psi.re[m]!, psi.im[m]!);
        const sizeN = Math.hypot(psi.re[n]!, psi.im[n]!);
        error[at] =
          sizeM * psi.error[n]! + sizeN * psi.error[m]! + psi.error[m]! * psi.error[n]! + 2 ** -52 * sizeM * sizeN;
      }
    }
    return { re, im, error };
  }
  const { norm, relative } = operatorNorm(state);
  for (const form of operatorForms(state).forms) {
    const kernel = kernelTable(form, nmax);
    // Sources of the kernel: n of |n⟩⟨m| first, then m, then the state's own.
    const stride = kernel.re.length / (side * side);
    for (let m = 0; m < side; m++) {
      for (let n = 0; n < side; n++) {
        const from = (n * side + m) * stride + stride - 1;
        const at = m * side + n;
        re[at]! += kernel.re[from]! / norm;
        im[at]! += kernel.im[from]! / norm;
        error[at]! += (kernel.error[from]! + 2 ** -53 * Math.hypot(kernel.re[from]!, kernel.im[from]!)) / norm;
      }
    }
  }
  for (let at = 0; at < side * side; at++) error[at]! += Math.hypot(re[at]!, im[at]!) * relative;
  return { re, im, error };
}

function kernelTable(form: Form, nmax: number): ReturnType<typeof coefficientTable> {
  const one = projectBetween(form, 1, 1, 1);
  // The kernel itself does not depend on the targets: they are put in again here.
  const kernel: Form = { ...one, sources: [nmax, nmax, ...one.sources.slice(2)] };
  if (tableSize(kernel.sources) > LARGEST_TABLE) throw tooLarge();
  if (nmax === 0) return coefficientTable(dropEmptySources(kernel));
  return coefficientTable(kernel);
}

/** P(0) … P(nmax) of a state of one mode, with an estimate of the error of each. */
export function photonDistribution(
  state: State,
  nmax: number,
): { readonly p: Float64Array; readonly error: Float64Array } {
  const p = new Float64Array(nmax + 1);
  const error = new Float64Array(nmax + 1);
  if (state.pure) {
    const psi = ketAmplitudes(state, nmax);
    for (let n = 0; n <= nmax; n++) {
      const size = Math.hypot(psi.re[n]!, psi.im[n]!);
      p[n] = size * size;
      error[n] = 2 * size * psi.error[n]! + psi.error[n]! ** 2 + 2 ** -52 * size * size;
    }
    return { p, error };
  }
  const { norm, relative } = operatorNorm(state);
  for (const form of operatorForms(state).forms) {
    const kernel = kernelTable(form, nmax);
    const stride = kernel.re.length / (nmax + 1) ** 2;
    for (let n = 0; n <= nmax; n++) {
      const from = (n * (nmax + 1) + n) * stride + stride - 1;
      p[n]! += kernel.re[from]! / norm;
      error[n]! += (kernel.error[from]! + 2 ** -53 * Math.abs(kernel.re[from]!)) / norm;
    }
  }
  for (let n = 0; n <= nmax; n++) error[n]! += Math.abs(p[n]!) * relative;
  return { p, error };
}

/** P(n, m) of two modes. */
export function jointProbability(
  state: State,
  n: number,
  m: number,
): { readonly value: number; readonly error: number } {
  if (state.pure) {
    const { value, error } = jointAmplitude(state, n, m);
    const size = abs(value);
    return { value: size * size, error: 2 * size * error + error * error + 2 ** -52 * size * size };
  }
  const { value, error } = expectation(state, (form) => projectBetween(projectBetween(form, 2, m, m), 1, n, n));
  return { value: value.re, error };
}

/** Exchanges ξ and η for −ξ and −η, as the second factor of a trace of two states needs. */
export function mirrored(form: Form): Form {
  const rows = Array.from({ length: form.outer }, (_, i) => [[i, complex(-1)] as const]);
  return substitute(form, rows, form.outer);
}

/** A form times a real factor. */
export const scaledForm = (form: Form, factor: number): Form => addConstant(form, complex(Math.log(factor)));
