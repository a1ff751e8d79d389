import { abs, complex, type Complex } from '../complex';
import { lastCoefficient, LARGEST_TABLE, tableSize } from './coefficients';
import {
  addConstant,
  addQuadratic,
  atZero,
  conjugateForm,
  directSum,
  integrate,
  substitute,
  type Form,
  type SubstitutionRow,
} from './form';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';

const I: Complex = { re: 0, im: 1 };
const MINUS_I: Complex = { re: 0, im: -1 };
const ONE = complex(1);
const MINUS_ONE = complex(-1);

/**
 * The normally ordered characteristic function ⟨φ| e^{ξa†} e^{−ηa} |ψ⟩ of |ψ⟩⟨φ|, from two kets in holomorphic form.
 *
 * Formula: ∫ Π d²z_m/π e^{−|z|²} φ̄(z* + ξ) ψ(z − η), by real and imaginary part of each z_m.
 * @returns a form in ξ₁, η₁ (, ξ₂, η₂) and the sources of both
 */
export function operatorOfKets(psi: Form, phi: Form): Form {
  const modes = psi.outer;
  const both = directSum(psi, conjugateForm(phi));
  // New variables: ξ_m, η_m for each mode, then x_m, y_m.
  const rows: SubstitutionRow[] = [];
  for (let m = 0; m < modes; m++) {
    rows.push([
      [2 * modes + 2 * m, ONE],
      [2 * modes + 2 * m + 1, I],
      [2 * m + 1, MINUS_ONE],
    ]);
  }
  for (let m = 0; m < modes; m++) {
    rows.push([
      [2 * modes + 2 * m, ONE],
      [2 * modes + 2 * m + 1, MINUS_I],
      [2 * m, ONE],
    ]);
  }
  let form = substitute(both, rows, 4 * modes);
  for (let m = 0; m < 2 * modes; m++) addQuadratic(form, 2 * modes + m, 2 * modes + m, complex(-2));
  for (let m = 2 * modes - 1; m >= 0; m--) {
    const next = integrate(form, 2 * modes + m);
    if (next === undefined) throw new MethodDoesNotApply('the Gaussians are too flat to be added exactly');
    form = next;
  }
  return addConstant(form, complex(-modes * Math.log(Math.PI)));
}

/** A sum of coefficients with an estimate of its absolute error. */
export interface FormSum {
  readonly value: Complex;
  readonly error: number;
}

/** The sum of what forms without outer variables mean. */
export function sumOfForms(forms: readonly Form[]): FormSum {
  let re = 0;
  let im = 0;
  let error = 0;
  for (const form of forms) {
    if (tableSize(form.sources) > LARGEST_TABLE) {
      throw new MethodDoesNotApply('the photon numbers are too large for polynomials times Gaussians');
    }
    const part = lastCoefficient(form);
    re += part.value.re;
    im += part.value.im;
    error += part.error + 2 ** -53 * abs(part.value);
  }
  return { value: { re, im }, error };
}

/** ⟨φ|ψ⟩ of two sums of Gaussians. */
export function innerProduct(phi: readonly Form[], psi: readonly Form[]): FormSum {
  const parts = phi.flatMap((left) => psi.map((right) => allAtZero(operatorOfKets(right, left))));
  return sumOfForms(parts);
}

/** A form at ξ = η = 0: the trace. */
export const allAtZero = (form: Form): Form =>
  atZero(
    form,
    Array.from({ length: form.outer }, (_, i) => i),
  );

/**
 * ⟨ψ|ψ⟩ of a sum of Gaussians.
 *
 * @throws MethodDoesNotApply where the norm vanishes to rounding
 */
export function normOfKetForms(forms: readonly Form[]): { readonly norm: number; readonly relative: number } {
  const { value, error } = innerProduct(forms, forms);
  if (!(value.re > 1e3 * error)) throw new StateVanishes('the norm is lost in the cancellation of its terms');
  return { norm: value.re, relative: error / value.re };
}
