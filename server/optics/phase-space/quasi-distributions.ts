import { complex, phase, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { OpticsError } from '../optics-error';
import type { State } from '../state';
import { StateMemo } from '../state-memo';
import { addConstant, addQuadratic, atValue, directSum, integrate, substitute, type Form } from './form';
import { sumOfForms, type FormSum } from './form-products';
import { operatorForms } from './operator-forms';
import { expectation, mirrored, operatorNorm } from './photon-numbers';

const I: Complex = { re: 0, im: 1 };
const MINUS_I: Complex = { re: 0, im: -1 };
const ONE = complex(1);

const wignerCache = new StateMemo<readonly Form[]>();

/**
 * The s-ordered quasi-distribution of each Gaussian, as a form in the outer variables Re α and Im α.
 *
 * Formula: ∫ d²ξ/π² χ(ξ, ξ*) e^{(s−1)|ξ|²/2} e^{αξ* − α*ξ}.
 * @returns undefined where the integral does not exist
 */
function quasiForm(form: Form, s: number): Form | undefined {
  const turned = substitute(
    form,
    [
      [
        [2, ONE],
        [3, I],
      ],
      [
        [2, ONE],
        [3, MINUS_I],
      ],
    ],
    4,
  );
  addQuadratic(turned, 2, 2, complex(s - 1));
  addQuadratic(turned, 3, 3, complex(s - 1));
  // αξ* − α*ξ = 2i (Im α Re ξ − Re α Im ξ).
  addQuadratic(turned, 1, 2, complex(0, 2));
  addQuadratic(turned, 0, 3, complex(0, -2));
  const half = integrate(turned, 3);
  const whole = half === undefined ? undefined : integrate(half, 2);
  return whole === undefined ? undefined : addConstant(whole, complex(-2 * Math.log(Math.PI)));
}

const put = (form: Form, alpha: Complex): Form => atValue(atValue(form, 1, complex(alpha.im)), 0, complex(alpha.re));

/** The Wigner function of each Gaussian in Re α and Im α, unnormalised; remembered, since pictures ask for many points. */
export function wignerForms(state: State): readonly Form[] {
  let forms = wignerCache.get(state);
  if (forms === undefined) {
    forms = operatorForms(state).forms.map((form) => {
      const quasi = quasiForm(form, 0);
      if (quasi === undefined) throw new MethodDoesNotApply('the Gaussians have no Wigner function of their own');
      return quasi;
    });
    wignerCache.set(state, forms);
  }
  return forms;
}

/** W(x, p), ħ = 1, vacuum variance 1/2: half of the distribution over α, since d²α = dx dp/2. */
export function wigner(state: State, x: number, p: number): { readonly value: number; readonly error: number } {
  const alpha = { re: x * Math.SQRT1_2, im: p * Math.SQRT1_2 };
  const { norm, relative } = operatorNorm(state);
  const { value, error } = sumOfForms(wignerForms(state).map((form) => put(form, alpha)));
  const w = value.re / 2 / norm;
  return { value: w, error: error / 2 / norm + Math.abs(w) * relative };
}

/** Q(α) = ⟨α|ρ|α⟩/π. */
export function husimi(state: State, alpha: Complex): { readonly value: number; readonly error: number } {
  const { value, error } = expectation(state, (form) => {
    const quasi = quasiForm(form, -1);
    if (quasi === undefined) throw new MethodDoesNotApply('the Gaussians have no Q function of their own');
    return put(quasi, alpha);
  });
  return { value: value.re, error };
}

/**
 * P(α), where it is an ordinary function.
 *
 * @throws OpticsError where it is not: a delta function, its derivatives, or worse
 */
export function pFunction(state: State, alpha: Complex): { readonly value: number; readonly error: number } {
  const { value, error } = expectation(state, (form) => {
    const quasi = quasiForm(form, 1);
    if (quasi !== undefined) return put(quasi, alpha);
    throw new OpticsError(
      'this state has no P function that is an ordinary function (it is a delta function or more singular)',
      { functionName: 'pFunction', given: state, allowed: 'a state with enough thermal noise' },
    );
  });
  return { value: value.re, error };
}

/** χ_s(ξ) = Tr[ρ D(ξ)] e^{s|ξ|²/2}. */
export function characteristic(state: State, xi: Complex, s: number): FormSum {
  const size = ((s - 1) * (xi.re * xi.re + xi.im * xi.im)) / 2;
  return expectation(state, (form) =>
    addConstant(atValue(atValue(form, 1, { re: xi.re, im: -xi.im }), 0, xi), complex(size)),
  );
}

/** Density of x_θ: ∫ dk/2π χ(ik e^{iθ}/√2) e^{−ikx}. */
export function quadratureDensity(
  state: State,
  x: number,
  theta: number,
): { readonly value: number; readonly error: number } {
  const turn = phase(theta);
  const { value, error } = expectation(state, (form) => {
    const along = substitute(
      form,
      [
        [[1, { re: -turn.im * Math.SQRT1_2, im: turn.re * Math.SQRT1_2 }]],
        [[1, { re: -turn.im * Math.SQRT1_2, im: -turn.re * Math.SQRT1_2 }]],
      ],
      2,
    );
    addQuadratic(along, 1, 1, complex(-0.5));
    addQuadratic(along, 0, 1, complex(0, -1));
    const whole = integrate(along, 1);
    if (whole === undefined) throw new MethodDoesNotApply('the Gaussians have no density of their own');
    return addConstant(atValue(whole, 0, complex(x)), complex(-Math.log(2 * Math.PI)));
  });
  return { value: value.re, error };
}

/**
 * Tr ρσ of two states of as many modes.
 *
 * Formula: ∫ Π d²ξ/π χ_ρ(ξ) χ_σ(−ξ), both in symmetric order.
 */
export function traceOfProduct(left: State, right: State): { readonly value: number; readonly error: number } {
  const one = operatorNorm(left);
  const two = operatorNorm(right);
  const rights = operatorForms(right).forms.map(mirrored);
  const parts = operatorForms(left).forms.flatMap((form) => rights.map((other) => productTrace(form, other)));
  const sum = sumOfForms(parts);
  const norm = one.norm * two.norm;
  const value = sum.value.re / norm;
  return { value, error: sum.error / norm + Math.abs(value) * (one.relative + two.relative) };
}

function productTrace(left: Form, right: Form): Form {
  const outer = left.outer;
  const modes = outer / 2;
  const both = directSum(left, right);
  const rows = Array.from({ length: 2 * outer }, (_, i) => {
    const mode = (i % outer) >> 1;
    return [[2 * mode, ONE] as const, [2 * mode + 1, i % 2 === 0 ? I : MINUS_I] as const];
  });
  let form = substitute(both, rows, outer);
  for (let i = 0; i < outer; i++) addQuadratic(form, i, i, complex(-2));
  for (let i = outer - 1; i >= 0; i--) {
    const next = integrate(form, i);
    if (next === undefined) throw new MethodDoesNotApply('the Gaussians are too flat for a trace of a product');
    form = next;
  }
  return addConstant(form, complex(-modes * Math.log(Math.PI)));
}
