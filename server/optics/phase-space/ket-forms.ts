import { abs2, complex, conjugate, multiply, times, logarithm, type Complex } from '../complex';
import type { State, Superposition } from '../state';
import { StateMemo } from '../state-memo';
import {
  addConstant,
  addLinear,
  addQuadratic,
  copyForm,
  diffuse,
  directSum,
  outerToSources,
  substitute,
  unitForm,
  withSources,
  type Form,
} from './form';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { normOfKetForms } from './form-products';

/** Most Gaussians that one state is summed of. */
const MOST_TERMS = 400;

/** Gaussians that add up to a state, and the relative error that their common factor may have. */
export interface Forms {
  readonly forms: readonly Form[];
  readonly relative: number;
}

const cache = new StateMemo<Forms>();

/**
 * A pure state as a sum of Gaussians in holomorphic form: ψ(z) = Σ ψ_n zⁿ/√n!, one outer variable a mode.
 *
 * @throws MethodDoesNotApply for states that are not pure, or not sums of Gaussians
 */
export function ketForms(state: State): Forms {
  const known = cache.get(state);
  if (known !== undefined) return known;
  const built = build(state);
  if (built.forms.length > MOST_TERMS) throw new MethodDoesNotApply(`more than ${MOST_TERMS} Gaussians`);
  cache.set(state, built);
  return built;
}

const exactly = (...forms: readonly Form[]): Forms => ({ forms, relative: 0 });

const mapForms = (state: State, change: (form: Form) => Form): Forms => {
  const { forms, relative } = ketForms(state);
  return { forms: forms.map(change), relative };
};

/** ½ ln cosh r without overflow. */
const halfLogCosh = (r: number): number => (r + Math.log1p(Math.exp(-2 * r)) - Math.LN2) / 2;

function build(state: State): Forms {
  switch (state.kind) {
    case 'fock': {
      if (state.n === 0) return exactly(unitForm(1));
      const form = withSources(unitForm(1), [state.n]);
      addQuadratic(form, 0, 1, complex(1));
      return exactly(form);
    }
    case 'coherent':
      return exactly(coherentForm(state.alpha));
    case 'squeezed': {
      const form = unitForm(1);
      addQuadratic(form, 0, 0, times(state.direction, -Math.tanh(state.r)));
      return exactly(addConstant(form, complex(-halfLogCosh(state.r))));
    }
    case 'cat': {
      const even = coherentForm(state.alpha);
      const odd = addConstant(coherentForm(times(state.alpha, -1)), complex(0, state.theta));
      const overlap = Math.exp(-2 * abs2(state.alpha));
      // 1 + cos θ e^{−2|α|²} without cancellation for small odd cats.
      const half = Math.cos(state.theta / 2);
      const norm = 4 * half * half + 2 * Math.cos(state.theta) * Math.expm1(-2 * abs2(state.alpha));
      if (!(norm > 1e-14 * overlap)) throw new MethodDoesNotApply('the norm vanishes');
      const shift = complex(-Math.log(norm) / 2);
      return exactly(addConstant(even, shift), addConstant(odd, shift));
    }
    case 'displaced':
      return mapForms(state.state, (form) => displaceKet(form, state.mode - 1, state.alpha));
    case 'squeeze':
      return mapForms(state.state, (form) => squeezeKet(form, state.mode - 1, state.r, state.direction));
    case 'photonAdded': {
      const added = mapForms(state.state, (form) => {
        const wider = withSources(form, [state.k]);
        addQuadratic(wider, 0, wider.size - 1, complex(1));
        return wider;
      });
      return normalised(added);
    }
    case 'photonSubtracted': {
      const subtracted = mapForms(state.state, (form) => {
        const wider = substitute(
          form,
          [
            [
              [0, complex(1)],
              [1, complex(1)],
            ],
          ],
          2,
        );
        // The second outer variable becomes a source: it takes k photons.
        return { ...wider, outer: 1, sources: [state.k, ...form.sources] };
      });
      return normalised(subtracted);
    }
    case 'product': {
      const first = ketForms(state.first);
      const second = ketForms(state.second);
      return {
        forms: first.forms.flatMap((left) => second.forms.map((right) => directSum(left, right))),
        relative: first.relative + second.relative,
      };
    }
    case 'twinBeam': {
      const form = unitForm(2);
      addQuadratic(form, 0, 1, times(state.direction, Math.tanh(state.r)));
      return exactly(addConstant(form, complex(-2 * halfLogCosh(state.r))));
    }
    case 'twoModeSqueeze':
      return mapForms(state.state, (form) => {
        // Two squeezers between two balanced splitters.
        const mixed = splitKet(form, 0.5, complex(1));
        const one = squeezeKet(mixed, 0, state.r, times(state.direction, -1));
        const two = squeezeKet(one, 1, state.r, state.direction);
        return splitKet(two, 0.5, complex(-1));
      });
    case 'beamSplitter':
      return mapForms(state.state, (form) => splitKet(form, state.transmittance, state.direction));
    case 'phaseShift':
      return mapForms(state.state, (form) => {
        const rows = identityRows(form.outer).map((row, mode) =>
          mode === state.mode - 1 ? [[mode, state.direction] as const] : row,
        );
        return substitute(form, rows, form.outer);
      });
    case 'heralded':
      return normalised(
        mapForms(state.state, (form) => {
          const kept = 2 - state.mode;
          const rows = kept === 0 ? identityRows(2) : [[[1, complex(1)] as const], [[0, complex(1)] as const]];
          const ordered = substitute(form, rows, 2);
          return outerToSources(ordered, [state.n]);
        }),
      );
    case 'superposition':
      return superposed(state);
    case 'mixture': {
      const present = state.states.filter((_, index) => (state.probabilities[index] ?? 0) > 0);
      const only = present[0];
      if (present.length === 1 && only !== undefined) return ketForms(only);
      throw new MethodDoesNotApply('a mixture is not a pure state');
    }
    case 'output':
      if (state.state.kind === 'product') return ketForms(state.mode === 1 ? state.state.first : state.state.second);
      throw new MethodDoesNotApply('a reduced state is not a pure state');
    case 'thermal':
      if (state.nbar === 0) return exactly(unitForm(1));
      throw new MethodDoesNotApply('a thermal state is not a pure state');
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert':
    case 'dephased':
      if (state.pure) {
        const turn = state.kind === 'damp' || state.kind === 'invert' ? state.omega * state.t : 0;
        if (turn === 0) return ketForms(state.state);
      }
      throw new MethodDoesNotApply('not written as a pure state');
    case 'phaseAveraged':
    case 'clicked':
      throw new MethodDoesNotApply('not a pure state');
  }
}

function coherentForm(alpha: Complex): Form {
  const form = unitForm(1);
  addLinear(form, 0, alpha);
  return addConstant(form, complex(-abs2(alpha) / 2));
}

function identityRows(count: number): (readonly (readonly [number, Complex])[])[] {
  return Array.from({ length: count }, (_, i) => [[i, complex(1)] as const]);
}

/** D(α)ψ(z) = e^{−|α|²/2} e^{αz} ψ(z − α*). */
function displaceKet(form: Form, mode: number, alpha: Complex): Form {
  const back = times(conjugate(alpha), -1);
  const result = copyForm(form);
  for (let i = 0; i < form.size; i++) {
    const b = { re: form.bRe[i * form.size + mode]!, im: form.bIm[i * form.size + mode]! };
    addLinear(result, i, multiply(b, back));
  }
  addLinear(result, mode, alpha);
  const b = { re: form.bRe[mode * form.size + mode]!, im: form.bIm[mode * form.size + mode]! };
  const d = { re: form.dRe[mode]!, im: form.dIm[mode]! };
  const square = times(multiply(multiply(b, back), back), 0.5);
  const shift = multiply(d, back);
  return addConstant(result, { re: square.re + shift.re - abs2(alpha) / 2, im: square.im + shift.im });
}

/** S(ζ) = exp(−½τa†²) (cosh r)^{−(a†a + ½)} exp(½τ*a²), τ = e^{iφ} tanh r. */
function squeezeKet(form: Form, mode: number, r: number, direction: Complex): Form {
  const tau = times(direction, Math.tanh(r));
  const diffused = diffuse(form, mode, conjugate(tau));
  const rows = identityRows(form.outer).map((row, index) =>
    index === mode ? [[index, complex(1 / Math.cosh(r))] as const] : row,
  );
  const scaled = copyForm(substitute(diffused, rows, form.outer));
  addQuadratic(scaled, mode, mode, times(tau, -1));
  return addConstant(scaled, complex(-halfLogCosh(r)));
}

/** a_j† → Σ_k U_kj b_k†. */
function splitKet(form: Form, transmittance: number, direction: Complex): Form {
  const t = complex(Math.sqrt(transmittance));
  const rho = times(direction, Math.sqrt(1 - transmittance));
  const rows = [
    [[0, t] as const, [1, times(conjugate(rho), -1)] as const],
    [[0, rho] as const, [1, t] as const],
  ];
  return substitute(form, rows, 2);
}

function superposed(state: Superposition): Forms {
  const forms: Form[] = [];
  let relative = 0;
  for (const term of state.terms) {
    if (abs2(term.amplitude) === 0) continue;
    const factor = logarithm(term.amplitude);
    const part = ketForms(term.state);
    relative = Math.max(relative, part.relative);
    forms.push(...part.forms.map((form) => addConstant(form, factor)));
  }
  return { forms, relative };
}

function normalised({ forms, relative }: Forms): Forms {
  const own = normOfKetForms(forms);
  const shift = complex(-Math.log(own.norm) / 2);
  return { forms: forms.map((form) => addConstant(form, shift)), relative: relative + own.relative };
}
