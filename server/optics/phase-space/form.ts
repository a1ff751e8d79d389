import { ONE, abs, add, complex, divide, logarithm, multiply, type Complex } from '../complex';

/**
 * exp(½ vᵀB v + dᵀv + c) in complex variables v: first the outer ones (arguments of a characteristic function or
 * of a ket in holomorphic form), then formal ones, the "sources".
 *
 * A source with target n stands for the n-th number state (or photon, added or taken): the form means the
 * coefficient of Π s_jⁿ, times √n! each, so that number states are polynomials times Gaussians without one
 * polynomial being written out. `sources` holds their targets. Coefficients are symmetric and complex, row by
 * row; nothing is truncated.
 */
export interface Form {
  readonly outer: number;
  readonly sources: readonly number[];
  readonly size: number;
  readonly bRe: Float64Array;
  readonly bIm: Float64Array;
  readonly dRe: Float64Array;
  readonly dIm: Float64Array;
  readonly c: Complex;
}

/** The form 1 in some outer variables. */
export function unitForm(outer: number): Form {
  return blank(outer, []);
}

function blank(outer: number, sources: readonly number[]): Form {
  const size = outer + sources.length;
  return {
    outer,
    sources,
    size,
    bRe: new Float64Array(size * size),
    bIm: new Float64Array(size * size),
    dRe: new Float64Array(size),
    dIm: new Float64Array(size),
    c: { re: 0, im: 0 },
  };
}

/** The same numbers in arrays of their own, for a caller that goes on to add to them. */
export function copyForm(form: Form): Form {
  return { ...form, bRe: form.bRe.slice(), bIm: form.bIm.slice(), dRe: form.dRe.slice(), dIm: form.dIm.slice() };
}

/** B_ij (and B_ji) of a form. */
export const quadratic = (form: Form, i: number, j: number): Complex => ({
  re: form.bRe[i * form.size + j]!,
  im: form.bIm[i * form.size + j]!,
});

/** d_i of a form. */
export const linear = (form: Form, i: number): Complex => ({ re: form.dRe[i]!, im: form.dIm[i]! });

/** Adds to B_ij and B_ji in place; for forms fresh from `copyForm`, `unitForm`, `withSources` and the like. */
export function addQuadratic(form: Form, i: number, j: number, value: Complex): void {
  form.bRe[i * form.size + j]! += value.re;
  form.bIm[i * form.size + j]! += value.im;
  if (i === j) return;
  form.bRe[j * form.size + i]! += value.re;
  form.bIm[j * form.size + i]! += value.im;
}

/** Adds to d_i in place. */
export function addLinear(form: Form, i: number, value: Complex): void {
  form.dRe[i]! += value.re;
  form.dIm[i]! += value.im;
}

/** The form times e^value. */
export const addConstant = (form: Form, value: Complex): Form => ({ ...form, c: add(form.c, value) });

/** The complex conjugate, in the conjugate variables. */
export function conjugateForm(form: Form): Form {
  return {
    ...form,
    bIm: form.bIm.map((x) => -x),
    dIm: form.dIm.map((x) => -x),
    c: { re: form.c.re, im: -form.c.im },
  };
}

/** The form with new sources, not yet coupled to anything. */
export function withSources(form: Form, targets: readonly number[]): Form {
  const result = blank(form.outer, [...form.sources, ...targets]);
  for (let i = 0; i < form.size; i++) {
    result.dRe[i] = form.dRe[i]!;
    result.dIm[i] = form.dIm[i]!;
    for (let j = 0; j < form.size; j++) {
      result.bRe[i * result.size + j] = form.bRe[i * form.size + j]!;
      result.bIm[i * result.size + j] = form.bIm[i * form.size + j]!;
    }
  }
  return { ...result, c: form.c };
}

/** The product of two forms in separate variables: outer ones of both, then sources of both. */
export function directSum(left: Form, right: Form): Form {
  const result = blank(left.outer + right.outer, [...left.sources, ...right.sources]);
  const place = (form: Form, outerStart: number, sourceStart: number) => {
    const at = (i: number) => (i < form.outer ? outerStart + i : sourceStart + i - form.outer);
    for (let i = 0; i < form.size; i++) {
      result.dRe[at(i)] = form.dRe[i]!;
      result.dIm[at(i)] = form.dIm[i]!;
      for (let j = 0; j < form.size; j++) {
        result.bRe[at(i) * result.size + at(j)] = form.bRe[i * form.size + j]!;
        result.bIm[at(i) * result.size + at(j)] = form.bIm[i * form.size + j]!;
      }
    }
  };
  place(left, 0, result.outer);
  place(right, left.outer, result.outer + left.sources.length);
  return { ...result, c: add(left.c, right.c) };
}

/** A row of a substitution: [new variable, factor] pairs that an old outer variable becomes the sum of. */
export type SubstitutionRow = readonly (readonly [variable: number, factor: Complex])[];

/** Replaces the outer variables by linear combinations of new ones; the sources stay. */
export function substitute(form: Form, rows: readonly SubstitutionRow[], newOuter: number): Form {
  const result = blank(newOuter, form.sources);
  const shift = newOuter - form.outer;
  const rowsOf = (i: number): SubstitutionRow => (i < form.outer ? (rows[i] ?? []) : [[i + shift, ONE]]);
  for (let i = 0; i < form.size; i++) {
    const left = rowsOf(i);
    for (const [a, factor] of left) addLinear(result, a, multiply(linear(form, i), factor));
    for (let j = 0; j < form.size; j++) {
      const value = quadratic(form, i, j);
      if (value.re === 0 && value.im === 0) continue;
      for (const [a, factorA] of left) {
        const part = multiply(value, factorA);
        for (const [b, factorB] of rowsOf(j)) {
          const whole = multiply(part, factorB);
          result.bRe[a * result.size + b]! += whole.re;
          result.bIm[a * result.size + b]! += whole.im;
        }
      }
    }
  }
  return { ...result, c: form.c };
}

/** Leaves out some variables whose values have been put in or summed over. */
function without(form: Form, gone: readonly number[]): Form {
  const kept: number[] = [];
  for (let i = 0; i < form.size; i++) if (!gone.includes(i)) kept.push(i);
  const outer = kept.filter((i) => i < form.outer).length;
  const result = blank(
    outer,
    form.sources.filter((_, j) => !gone.includes(form.outer + j)),
  );
  kept.forEach((from, to) => {
    result.dRe[to] = form.dRe[from]!;
    result.dIm[to] = form.dIm[from]!;
    kept.forEach((fromJ, toJ) => {
      result.bRe[to * result.size + toJ] = form.bRe[from * form.size + fromJ]!;
      result.bIm[to * result.size + toJ] = form.bIm[from * form.size + fromJ]!;
    });
  });
  return { ...result, c: form.c };
}

/** Puts 0 for outer variables. */
export const atZero = (form: Form, variables: readonly number[]): Form => without(form, variables);

/** Puts a value for one outer variable. */
export function atValue(form: Form, variable: number, value: Complex): Form {
  const shifted = copyForm(form);
  for (let i = 0; i < form.size; i++) {
    if (i !== variable) addLinear(shifted, i, multiply(quadratic(form, i, variable), value));
  }
  const own = multiply(multiply(quadratic(form, variable, variable), value), value);
  const c = add(form.c, add(multiply(linear(form, variable), value), { re: own.re / 2, im: own.im / 2 }));
  return without({ ...shifted, c }, [variable]);
}

/** Turns outer variables into sources with the given targets: the coefficient is asked for, not the function. */
export function outerToSources(form: Form, targets: readonly number[]): Form {
  return { ...form, outer: form.outer - targets.length, sources: [...targets, ...form.sources] };
}

/**
 * Integrates over one real outer variable from −∞ to ∞.
 *
 * The square root is the principal one of each pivot: pivots of a complex symmetric matrix with positive definite
 * real part have positive real parts, so the product is the right branch.
 * @returns the form in the other variables, or undefined where the integral does not exist
 */
export function integrate(form: Form, variable: number): Form | undefined {
  const b = quadratic(form, variable, variable);
  if (!(b.re < 0)) return undefined;
  const inverse = divide(ONE, { re: -b.re, im: -b.im });
  const result = copyForm(form);
  const own = linear(form, variable);
  for (let i = 0; i < form.size; i++) {
    const bi = quadratic(form, i, variable);
    if (i === variable || (bi.re === 0 && bi.im === 0)) continue;
    const scaled = multiply(bi, inverse);
    addLinear(result, i, multiply(scaled, own));
    for (let j = 0; j < form.size; j++) {
      const whole = multiply(scaled, quadratic(form, j, variable));
      result.bRe[i * form.size + j]! += whole.re;
      result.bIm[i * form.size + j]! += whole.im;
    }
  }
  const exponent = multiply(multiply(own, own), inverse);
  const root = logarithm({ re: 2 * Math.PI * inverse.re, im: 2 * Math.PI * inverse.im });
  const c = add(form.c, { re: (exponent.re + root.re) / 2, im: (exponent.im + root.im) / 2 });
  return without({ ...result, c }, [variable]);
}

/** exp(½ τ ∂²) on one outer variable, |τ B_ii| < 1: what ½ τ a² does to a ket in holomorphic form. */
export function diffuse(form: Form, variable: number, tau: Complex): Form {
  const rest = complex(1);
  const product = multiply(tau, quadratic(form, variable, variable));
  const denominator = { re: rest.re - product.re, im: -product.im };
  const weight = divide(tau, denominator);
  const result = copyForm(form);
  const own = linear(form, variable);
  for (let i = 0; i < form.size; i++) {
    const scaled = multiply(quadratic(form, i, variable), weight);
    if (scaled.re === 0 && scaled.im === 0) continue;
    addLinear(result, i, multiply(scaled, own));
    for (let j = 0; j < form.size; j++) {
      const whole = multiply(scaled, quadratic(form, j, variable));
      result.bRe[i * form.size + j]! += whole.re;
      result.bIm[i * form.size + j]! += whole.im;
    }
  }
  const exponent = multiply(multiply(own, own), weight);
  const root = logarithm(denominator);
  const c = add(form.c, { re: (exponent.re - root.re) / 2, im: (exponent.im - root.im) / 2 });
  return { ...result, c };
}

/** Size of the largest coefficient, for estimates of rounding. */
export function largestCoefficient(form: Form): number {
  let most = abs(form.c);
  for (let i = 0; i < form.bRe.length; i++) most = Math.max(most, Math.hypot(form.bRe[i]!, form.bIm[i]!));
  return most;
}
