import { complex, conjugate, phase, times, type Complex } from '../complex';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import { channelOf, type Channel, type Mode, type State } from '../state';
import { StateMemo } from '../state-memo';
import {
  addConstant,
  addLinear,
  addQuadratic,
  atZero,
  copyForm,
  directSum,
  integrate,
  outerToSources,
  substitute,
  unitForm,
  withSources,
  type Form,
  type SubstitutionRow,
} from './form';
import { allAtZero, operatorOfKets, sumOfForms, type FormSum } from './form-products';
import { ketForms, type Forms } from './ket-forms';

/** Most Gaussians that one state is summed of. */
const MOST_TERMS = 400;

const cache = new StateMemo<Forms>();
const traces = new StateMemo<FormSum>();

/**
 * A state as a sum of Gaussians: its normally ordered characteristic function χ(ξ, η) = Tr[ρ e^{ξa†} e^{−ηa}] with
 * ξ and η = ξ* as independent variables, two a mode (ξ₁, η₁, ξ₂, η₂). Not normalised: divide by `traceOf`.
 *
 * @throws MethodDoesNotApply for states that are not sums of Gaussians
 */
export function operatorForms(state: State): Forms {
  const known = cache.get(state);
  if (known !== undefined) return known;
  const built = build(state);
  if (built.forms.length > MOST_TERMS) throw new MethodDoesNotApply(`more than ${MOST_TERMS} Gaussians`);
  cache.set(state, built);
  return built;
}

/**
 * The trace of `operatorForms`: 1 for states that are normalised as written, a probability for conditioned ones.
 *
 * @throws MethodDoesNotApply where it vanishes to rounding
 */
export function traceOf(state: State): FormSum {
  const known = traces.get(state);
  if (known !== undefined) return known;
  const { forms } = operatorForms(state);
  const trace = sumOfForms(forms.map(allAtZero));
  if (!(trace.value.re > 1e3 * trace.error)) {
    throw new StateVanishes('the norm is lost in the cancellation of its terms');
  }
  traces.set(state, trace);
  return trace;
}

const exactly = (...forms: readonly Form[]): Forms => ({ forms, relative: 0 });

const mapForms = (state: State, change: (form: Form) => Form): Forms => {
  const { forms, relative } = operatorForms(state);
  return { forms: forms.map(change), relative };
};

function normalised(state: State): Forms {
  const { forms, relative } = operatorForms(state);
  const trace = traceOf(state);
  const shift = complex(-Math.log(trace.value.re));
  return {
    forms: forms.map((form) => addConstant(form, shift)),
    relative: relative + trace.error / trace.value.re,
  };
}

function build(state: State): Forms {
  switch (state.kind) {
    case 'fock': {
      if (state.n === 0) return exactly(unitForm(2));
      const form = withSources(unitForm(2), [state.n, state.n]);
      addQuadratic(form, 2, 3, complex(1));
      addQuadratic(form, 0, 3, complex(1));
      addQuadratic(form, 1, 2, complex(-1));
      return exactly(form);
    }
    case 'coherent': {
      const form = unitForm(2);
      addLinear(form, 0, conjugate(state.alpha));
      addLinear(form, 1, times(state.alpha, -1));
      return exactly(form);
    }
    case 'thermal': {
      const form = unitForm(2);
      addQuadratic(form, 0, 1, complex(-state.nbar));
      return exactly(form);
    }
    case 'squeezed':
      return exactly(squeezeOperator(unitForm(2), 0, state.r, state.direction));
    case 'cat':
    case 'superposition': {
      const kets = ketForms(state);
      return {
        forms: kets.forms.flatMap((psi) => kets.forms.map((phi) => operatorOfKets(psi, phi))),
        relative: 2 * kets.relative,
      };
    }
    case 'displaced':
      return mapForms(state.state, (form) => {
        const result = copyForm(form);
        addLinear(result, 2 * state.mode - 2, conjugate(state.alpha));
        addLinear(result, 2 * state.mode - 1, times(state.alpha, -1));
        return result;
      });
    case 'squeeze':
      return mapForms(state.state, (form) => squeezeOperator(form, state.mode - 1, state.r, state.direction));
    case 'mixture': {
      const forms: Form[] = [];
      let relative = 0;
      state.states.forEach((part, index) => {
        const probability = state.probabilities[index] ?? 0;
        if (probability === 0) return;
        const own = normalised(part);
        relative = Math.max(relative, own.relative);
        forms.push(...own.forms.map((form) => addConstant(form, complex(Math.log(probability)))));
      });
      return { forms, relative };
    }
    case 'photonAdded':
      return mapForms(state.state, (form) => {
        if (state.k === 0) return form;
        // Wherever ξ stands, a source joins it; e^{ta} and e^{sa†} then need normal order.
        const rows: SubstitutionRow[] = [
          [
            [0, complex(1)],
            [2, complex(1)],
          ],
          [
            [1, complex(1)],
            [3, complex(-1)],
          ],
        ];
        const moved = substitute(form, rows, 4);
        const result: Form = copyForm({ ...moved, outer: 2, sources: [state.k, state.k, ...form.sources] });
        addQuadratic(result, 0, 3, complex(1));
        addQuadratic(result, 1, 2, complex(-1));
        addQuadratic(result, 2, 3, complex(1));
        return result;
      });
    case 'photonSubtracted':
      return mapForms(state.state, (form) => {
        if (state.k === 0) return form;
        const rows: SubstitutionRow[] = [
          [
            [0, complex(1)],
            [2, complex(1)],
          ],
          [
            [1, complex(1)],
            [3, complex(-1)],
          ],
        ];
        const moved = substitute(form, rows, 4);
        return { ...moved, outer: 2, sources: [state.k, state.k, ...form.sources] };
      });
    case 'product': {
      const first = operatorForms(state.first);
      const second = operatorForms(state.second);
      return {
        forms: first.forms.flatMap((left) => second.forms.map((right) => directSum(left, right))),
        relative: first.relative + second.relative,
      };
    }
    case 'twinBeam':
      return exactly(twoModeSqueezeOperator(unitForm(4), state.r, state.direction));
    case 'twoModeSqueeze':
      return mapForms(state.state, (form) => twoModeSqueezeOperator(form, state.r, state.direction));
    case 'beamSplitter':
      return mapForms(state.state, (form) => splitOperator(form, state.transmittance, state.direction));
    case 'phaseShift':
      return mapForms(state.state, (form) => channelOperator(form, state.mode, 1, 0, state.direction));
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const channel = channelOf(state);
      return mapForms(state.state, (form) => applyChannel(form, channel));
    }
    case 'output':
      return mapForms(state.state, (form) => traceOut(form, other(state.mode)));
    case 'heralded':
      return mapForms(state.state, (form) => project(form, state.mode, state.n));
    case 'clicked': {
      const { forms, relative } = operatorForms(state.state);
      const all = forms.map((form) => traceOut(form, state.mode));
      // 1 − e^{−dark} :e^{−η a†a}:, the probability of telling something.
      const dark = complex(-state.dark, Math.PI);
      const silent = forms.map((form) => addConstant(noCounts(form, state.mode, state.eta), dark));
      return { forms: [...all, ...silent], relative };
    }
    case 'phaseAveraged':
      throw new MethodDoesNotApply('an average over all phases is not a finite sum of Gaussians');
    case 'dephased':
      if (state.sigma === 0) return operatorForms(state.state);
      throw new MethodDoesNotApply('an average over phases is not a finite sum of Gaussians');
  }
}

const other = (mode: Mode): Mode => (mode === 1 ? 2 : 1);

/** Puts ξ = η = 0 in a mode. */
export const traceOut = (form: Form, mode: Mode): Form => atZero(form, [2 * mode - 2, 2 * mode - 1]);

/** Replaces the two variables of one mode by combinations of themselves. */
function turnMode(form: Form, mode: Mode, rows: readonly [SubstitutionRow, SubstitutionRow]): Form {
  const all: SubstitutionRow[] = [];
  for (let i = 0; i < form.outer; i++) all.push([[i, complex(1)]]);
  all[2 * mode - 2] = rows[0];
  all[2 * mode - 1] = rows[1];
  return substitute(form, all, form.outer);
}

function applyChannel(form: Form, channel: Channel): Form {
  return channelOperator(form, channel.mode, channel.gain, channel.noise, phase(channel.rotation));
}

/** b = √gain e^{iφ} a + noise: ξ → √gain e^{−iφ} ξ, and the noise in normal order. */
function channelOperator(form: Form, mode: Mode, gain: number, noise: number, direction: Complex): Form {
  const factor = times(direction, Math.sqrt(gain));
  const xi = 2 * mode - 2;
  const eta = xi + 1;
  const turned = turnMode(form, mode, [[[xi, conjugate(factor)]], [[eta, factor]]]);
  if (noise !== 0) addQuadratic(turned, xi, eta, complex(-noise));
  return turned;
}

/** The same as `channelOperator` for a loss, for figures that count with an inefficient detector. */
export const loseOperator = (form: Form, mode: Mode, eta: number): Form =>
  channelOperator(form, mode, eta, 0, complex(1));

/** a → a cosh r − e^{iφ} a† sinh r. */
function squeezeOperator(form: Form, modeIndex: number, r: number, direction: Complex): Form {
  const cosh = complex(Math.cosh(r));
  const sinh = Math.sinh(r);
  const s = times(direction, sinh);
  const xi = 2 * modeIndex;
  const eta = xi + 1;
  const mode: Mode = modeIndex === 0 ? 1 : 2;
  const turned = turnMode(form, mode, [
    [
      [xi, cosh],
      [eta, s],
    ],
    [
      [xi, conjugate(s)],
      [eta, cosh],
    ],
  ]);
  addQuadratic(turned, xi, eta, complex(-sinh * sinh));
  addQuadratic(turned, xi, xi, times(conjugate(s), -cosh.re));
  addQuadratic(turned, eta, eta, times(s, -cosh.re));
  return turned;
}

/** a₁ → a₁ cosh r + e^{iφ} a₂† sinh r and the same with 1 and 2 exchanged. */
function twoModeSqueezeOperator(form: Form, r: number, direction: Complex): Form {
  const cosh = complex(Math.cosh(r));
  const sinh = Math.sinh(r);
  const s = times(direction, sinh);
  const minus = times(s, -1);
  const minusConjugate = times(conjugate(s), -1);
  const turned = substitute(
    form,
    [
      [
        [0, cosh],
        [3, minus],
      ],
      [
        [1, cosh],
        [2, minusConjugate],
      ],
      [
        [2, cosh],
        [1, minus],
      ],
      [
        [3, cosh],
        [0, minusConjugate],
      ],
    ],
    4,
  );
  addQuadratic(turned, 0, 1, complex(-sinh * sinh));
  addQuadratic(turned, 2, 3, complex(-sinh * sinh));
  addQuadratic(turned, 0, 2, times(conjugate(s), cosh.re));
  addQuadratic(turned, 1, 3, times(s, cosh.re));
  return turned;
}

/** ξ₁ → √T ξ₁ − e^{iφ}√R ξ₂, ξ₂ → e^{−iφ}√R ξ₁ + √T ξ₂, and the conjugates for η. */
function splitOperator(form: Form, transmittance: number, direction: Complex): Form {
  const t = complex(Math.sqrt(transmittance));
  const rho = times(direction, Math.sqrt(1 - transmittance));
  return substitute(
    form,
    [
      [
        [0, t],
        [2, times(rho, -1)],
      ],
      [
        [1, t],
        [3, times(conjugate(rho), -1)],
      ],
      [
        [0, conjugate(rho)],
        [2, t],
      ],
      [
        [1, rho],
        [3, t],
      ],
    ],
    4,
  );
}

/**
 * Tr over one mode of ρ e^{μa†} :e^{−ηa†a}: e^{νa}: the mode's ξ becomes μ and its η becomes −ν.
 *
 * Formula: the normally ordered Gaussian average of χ over a disc of ⟨|δ|²⟩ = η.
 * @param efficiency η in (0, 1]
 */
function vacuumKernel(form: Form, mode: Mode, efficiency: number): Form {
  const xi = 2 * mode - 2;
  const eta = xi + 1;
  const x = form.outer;
  const y = form.outer + 1;
  const rows: SubstitutionRow[] = [];
  for (let i = 0; i < form.outer; i++) rows.push([[i, complex(1)]]);
  rows[xi] = [
    [xi, complex(1)],
    [x, complex(1)],
    [y, complex(0, 1)],
  ];
  rows[eta] = [
    [eta, complex(-1)],
    [x, complex(1)],
    [y, complex(0, -1)],
  ];
  const wider = substitute(form, rows, form.outer + 2);
  addQuadratic(wider, x, x, complex(-2 / efficiency));
  addQuadratic(wider, y, y, complex(-2 / efficiency));
  const half = integrate(wider, y);
  const whole = half === undefined ? undefined : integrate(half, x);
  if (whole === undefined) throw new MethodDoesNotApply('the Gaussians are too flat for photon numbers');
  return addConstant(whole, complex(-Math.log(Math.PI * efficiency)));
}

/** The unnormalised rest of a state after `mode` was found in |n⟩; of one mode nothing but the probability is left. */
export function project(form: Form, mode: Mode, n: number): Form {
  return projectBetween(form, mode, n, n);
}

/** Tr over one mode of ρ |n⟩⟨m|, as a form in what is left: matrix element ρ_mn. */
export function projectBetween(form: Form, mode: Mode, m: number, n: number): Form {
  const kernel = vacuumKernel(form, mode, 1);
  const xi = 2 * mode - 2;
  // Bring the mode's two variables last among the outer ones, then read coefficients of them.
  const rows: SubstitutionRow[] = [];
  let next = 0;
  for (let i = 0; i < kernel.outer; i++) {
    if (i === xi) rows.push([[kernel.outer - 2, complex(1)]]);
    else if (i === xi + 1) rows.push([[kernel.outer - 1, complex(1)]]);
    else rows.push([[next++, complex(1)]]);
  }
  const ordered = substitute(kernel, rows, kernel.outer);
  const reduced = outerToSources(ordered, [n, m]);
  // Sources with target 0 only mean "at 0".
  return dropEmptySources(reduced);
}

/** Puts 0 for sources whose target is 0. */
export function dropEmptySources(form: Form): Form {
  const empty = form.sources.flatMap((target, j) => (target === 0 ? [form.outer + j] : []));
  return empty.length === 0 ? form : atZero(form, empty);
}

/** The unnormalised rest after a detector of efficiency η on `mode` stayed silent. */
export function noCounts(form: Form, mode: Mode, eta: number): Form {
  return eta === 0 ? traceOut(form, mode) : traceOut(vacuumKernel(form, mode, eta), mode);
}
