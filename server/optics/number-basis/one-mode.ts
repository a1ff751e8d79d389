import { MethodDoesNotApply } from '../method-does-not-apply';

/** Levels of the largest density matrix of one mode. */
export const MOST_DENSITY_LEVELS = 512;

interface Levels {
  /** Numbers 0 … levels − 1 are kept. */
  readonly levels: number;
  /** Absolute rounding noise of an entry, beyond a relative error of a few units in the last place. */
  readonly noise: number;
  /** Bound on the weight outside. */
  readonly outside: number;
}

/** Amplitudes ⟨n|ψ⟩. */
export interface NumberKet extends Levels {
  readonly kind: 'ket';
  readonly re: Float64Array;
  readonly im: Float64Array;
}
/** Photon probabilities of a state without coherences. */
export interface NumberDiagonal extends Levels {
  readonly kind: 'diagonal';
  readonly p: Float64Array;
}
/** ρ_mn, row by row. */
export interface NumberDensity extends Levels {
  readonly kind: 'density';
  readonly re: Float64Array;
  readonly im: Float64Array;
}

/** A state of one mode in a number basis. */
export type NumberState = NumberKet | NumberDiagonal | NumberDensity;

/** Refuses a density matrix that would be too large, before its memory is taken. */
export function checkDensityLevels(levels: number): void {
  if (levels > MOST_DENSITY_LEVELS) {
    throw new MethodDoesNotApply(
      `it would take a density matrix of ${levels} levels, more than ${MOST_DENSITY_LEVELS}`,
    );
  }
}

/** The photon probabilities of any state of one mode. */
export function diagonalOf(state: NumberState): NumberDiagonal {
  const { levels, noise, outside } = state;
  if (state.kind === 'diagonal') return state;
  const p = new Float64Array(levels);
  if (state.kind === 'ket') {
    for (let n = 0; n < levels; n++) p[n] = state.re[n]! * state.re[n]! + state.im[n]! * state.im[n]!;
    // |ψ|² of noise e is 2|ψ|e; its largest entry stands for all.
    return { kind: 'diagonal', levels, p, noise: noise === 0 ? 0 : 2 * noise * Math.sqrt(Math.max(...p)), outside };
  }
  for (let n = 0; n < levels; n++) p[n] = state.re[n * levels + n]!;
  return { kind: 'diagonal', levels, p, noise, outside };
}

/** Whether a ket is one number state. */
export function isNumberState(state: NumberKet): boolean {
  let found = 0;
  for (let n = 0; n < state.levels && found < 2; n++) if (state.re[n] !== 0 || state.im[n] !== 0) found++;
  return found <= 1;
}

/** The density matrix of any state of one mode. */
export function densityOf(state: NumberState): NumberDensity {
  if (state.kind === 'density') return state;
  const { levels, outside } = state;
  checkDensityLevels(levels);
  const re = new Float64Array(levels * levels);
  const im = new Float64Array(levels * levels);
  if (state.kind === 'diagonal') {
    for (let n = 0; n < levels; n++) re[n * levels + n] = state.p[n]!;
    return { kind: 'density', levels, re, im, noise: state.noise, outside };
  }
  for (let m = 0; m < levels; m++) {
    const a = state.re[m]!;
    const b = state.im[m]!;
    if (a === 0 && b === 0) continue;
    for (let n = 0; n < levels; n++) {
      re[m * levels + n] = a * state.re[n]! + b * state.im[n]!;
      im[m * levels + n] = b * state.re[n]! - a * state.im[n]!;
    }
  }
  return { kind: 'density', levels, re, im, noise: 2 * state.noise, outside };
}

/** A state without coherences as `diagonal`, if a ket or density matrix happens to be one. */
export function simplest(state: NumberState): NumberState {
  if (state.kind === 'ket') return isNumberState(state) ? diagonalOf(state) : state;
  if (state.kind === 'diagonal') return state;
  const { levels } = state;
  for (let m = 0; m < levels; m++) {
    for (let n = 0; n < levels; n++) {
      if (m !== n && (state.re[m * levels + n] !== 0 || state.im[m * levels + n] !== 0)) return state;
    }
  }
  return diagonalOf(state);
}

/** ρ_mn of any state of one mode; 0 beyond its levels. */
export function elementOf(state: NumberState, m: number, n: number): { readonly re: number; readonly im: number } {
  const { levels } = state;
  if (m >= levels || n >= levels) return { re: 0, im: 0 };
  if (state.kind === 'diagonal') return { re: m === n ? state.p[n]! : 0, im: 0 };
  if (state.kind === 'density') return { re: state.re[m * levels + n]!, im: state.im[m * levels + n]! };
  return {
    re: state.re[m]! * state.re[n]! + state.im[m]! * state.im[n]!,
    im: state.im[m]! * state.re[n]! - state.re[m]! * state.im[n]!,
  };
}
