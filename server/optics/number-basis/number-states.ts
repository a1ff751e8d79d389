import { abs2, complex, phase, times } from '../complex';
import { MethodDoesNotApply, StateVanishes } from '../method-does-not-apply';
import { channelChain, channelsOf, type State } from '../state';
import { geometric } from '../special/distributions';
import { applyChannel, channelOnDiagonal } from './channels-on-numbers';
import { conditioned, type Conditioned } from './conditions';
import { detection } from './detection';
import { displacement, squeezer } from './displaced-numbers';
import { combineKets, shiftKet, splitKets, twinKet, weightOf } from './joint-ket';
import {
  checkUnitary,
  conditionedOn,
  multipliedOut,
  onMode,
  outputOf,
  throughChannel,
  type Ensemble,
  type JointState,
} from './joint-maps';
import { asKet, checkUnitaryWork, dephase, mix, moveNumbers, shift, superpose, transform } from './one-mode-maps';
import { diagonalOf, simplest, type NumberDiagonal, type NumberState } from './one-mode';
import { pushedIn } from './operations-on-factors';
import { catKet, coherentKet, displacedSqueezedKet, squeezedKet } from './pure-kets';
import { beforeMixing, builtOnce, resolve, type Resolution } from './resolution';

const EPS = 2 ** -52;

/**
 * A state of one mode in a number basis whose levels follow from a bound on the weight outside.
 *
 * @throws MethodDoesNotApply where the basis would be too large
 */
export const numberState = builtOnce(buildOneMode);

/**
 * A joint state in a number basis.
 *
 * @throws MethodDoesNotApply where it would be too large
 */
export const jointState = builtOnce(buildJoint);

function buildOneMode(state: State, resolution: Resolution): NumberState {
  switch (state.kind) {
    case 'fock': {
      const re = new Float64Array(state.n + 1);
      re[state.n] = 1;
      return { kind: 'ket', levels: state.n + 1, re, im: new Float64Array(state.n + 1), noise: 0, outside: 0 };
    }
    case 'coherent':
      return coherentKet(state.alpha, resolve(state, resolution));
    case 'thermal': {
      const { levels, outside } = resolve(state, resolution);
      const p = Float64Array.from({ length: levels }, (_, n) => geometric(n, state.nbar));
      return { kind: 'diagonal', levels, p, noise: 0, outside };
    }
    case 'squeezed':
      return squeezedKet(state.r, state.direction, resolve(state, resolution));
    case 'cat':
      return catKet(state.alpha, state.theta, resolve(state, resolution));
    case 'displaced': {
      if (state.state.kind === 'squeezed')
        return displacedSqueezedKet(state.alpha, state.state, resolve(state, resolution));
      const inner = numberState(state.state, beforeMixing(resolution));
      if (abs2(state.alpha) === 0) return inner;
      const { levels, outside } = resolve(state, resolution);
      checkUnitaryWork(inner, levels);
      return transform(inner, displacement(state.alpha, inner.levels, levels), outside);
    }
    case 'squeeze': {
      const inner = numberState(state.state, beforeMixing(resolution));
      if (state.r === 0) return inner;
      const { levels, outside } = resolve(state, resolution);
      checkUnitaryWork(inner, levels);
      return transform(inner, squeezer(state.r, state.direction, inner.levels, levels), outside);
    }
    case 'mixture': {
      const parts = likelyParts(state);
      const built = equallyWide(numberState, parts, resolution);
      return mix(built.map((part, index) => ({ state: simplest(part), probability: parts[index]!.probability })));
    }
    case 'phaseAveraged':
      return diagonalOf(numberState(state.state, resolution));
    case 'dephased':
      return dephase(numberState(state.state, resolution), state.sigma);
    case 'photonAdded':
    case 'photonSubtracted':
      return conditioned(resolution, (finer) => movePhotons(state, finer));
    case 'phaseShift':
      return shift(numberState(state.state, resolution), state.direction);
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { channel, inner: source } = channelChain(state);
      const inner = simplest(numberState(source, resolution));
      const turned = channel.rotation === 0 ? inner : shift(inner, phase(channel.rotation));
      return applyChannel(turned, channel, () => resolve(state, resolution));
    }
    case 'output':
    case 'heralded':
    case 'clicked': {
      const { joint, kept, weight } = detection(state);
      const before =
        state.kind === 'output'
          ? outputOf(jointState(joint, resolution), state.mode)
          : conditioned(resolution, (finer) => conditionedOn(jointState(joint, finer), state.mode, weight));
      if (kept === undefined) return before;
      return applyChannel(simplest(before), kept, () => resolve(state, resolution));
    }
    case 'superposition':
      return conditioned(resolution, (finer) => {
        const terms = state.terms.filter((term) => abs2(term.amplitude) > 0);
        const built = equallyWide(numberState, terms, finer);
        return superpose(terms.map(({ amplitude }, index) => ({ amplitude, ket: asKet(built[index]!) })));
      });
    default:
      throw new MethodDoesNotApply('a state of two modes is not one of one');
  }
}

/** The states of a mixture that it has. */
function likelyParts(mixture: Extract<State, { readonly kind: 'mixture' }>) {
  return mixture.states
    .map((state, index) => ({ state, probability: mixture.probabilities[index] ?? 0 }))
    .filter(({ probability }) => probability > 0);
}

/**
 * Builds states that meet in one sum, each as wide as the widest: where one ends and another still has amplitude, what
 * was left out of the first would show in proportion to its amplitude, not to its weight.
 */
function equallyWide<Built extends { readonly levels: number; readonly outside: number }>(
  build: (state: State, resolution: Resolution) => Built,
  parts: readonly { readonly state: State }[],
  resolution: Resolution,
): readonly Built[] {
  const built = parts.map(({ state }) => build(state, resolution));
  const widest = Math.max(...built.map(({ levels }) => levels));
  const wider = { ...resolution, least: Math.max(resolution.least, widest) };
  return built.map((each, index) =>
    each.levels < widest && each.outside > 0 ? build(parts[index]!.state, wider) : each,
  );
}

type Moved = Extract<State, { readonly kind: 'photonAdded' | 'photonSubtracted' }>;

/** √((n+k)!/n!) or √(n!/(n−k)!) on each amplitude, scaled so that nothing overflows. */
function movePhotons(state: Moved, resolution: Resolution): Conditioned {
  const { k } = state;
  const added = state.kind === 'photonAdded';
  const wanted = added ? resolution : { ...resolution, least: resolution.least + k };
  const size = resolve(state, resolution);
  const inner = numberState(state.state, { ...wanted, least: Math.max(wanted.least, size.levels + (added ? -k : k)) });
  return moveNumbers(inner, k, added, size.outside);
}

/** Photon probabilities only: channels, dephasing and moved photons need no coherences for them. */
export function numberDiagonal(state: State, resolution: Resolution): NumberDiagonal {
  switch (state.kind) {
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const { channel, inner } = channelChain(state);
      return channelOnDiagonal(numberDiagonal(inner, resolution), channel, () => resolve(state, resolution));
    }
    case 'phaseAveraged':
    case 'dephased':
    case 'phaseShift':
      return numberDiagonal(state.state, resolution);
    case 'photonAdded':
    case 'photonSubtracted': {
      const made = conditioned(resolution, (finer) => {
        const added = state.kind === 'photonAdded';
        const size = resolve(state, finer);
        const least = Math.max(finer.least, size.levels) + (added ? 0 : state.k);
        const inner = numberDiagonal(state.state, { ...finer, least });
        return moveNumbers(inner, state.k, added, size.outside);
      });
      return diagonalOf(made);
    }
    case 'mixture': {
      const parts = likelyParts(state).map((part) => ({ ...part, diagonal: numberDiagonal(part.state, resolution) }));
      const levels = Math.max(...parts.map(({ diagonal }) => diagonal.levels));
      const p = new Float64Array(levels);
      let outside = 0;
      let noise = 0;
      for (const { diagonal, probability } of parts) {
        for (let n = 0; n < diagonal.levels; n++) p[n]! += probability * diagonal.p[n]!;
        outside += probability * diagonal.outside;
        noise += probability * diagonal.noise;
      }
      return { kind: 'diagonal', levels, p, noise, outside };
    }
    case 'output': {
      const { joint, kept } = detection(state);
      const before = diagonalOf(outputOf(jointState(joint, resolution), state.mode));
      return kept === undefined ? before : channelOnDiagonal(before, kept, () => resolve(state, resolution));
    }
    default:
      return diagonalOf(numberState(state, resolution));
  }
}

function buildJoint(given: State, resolution: Resolution): JointState {
  const state = pushedIn(given);
  switch (state.kind) {
    case 'product':
      return {
        kind: 'factored',
        first: numberState(state.first, resolution),
        second: numberState(state.second, resolution),
      };
    case 'twinBeam': {
      const { levels, outside } = resolve(state, resolution);
      return { kind: 'ensemble', kets: [twinKet(state.r, state.direction, levels)], levels, noise: 0, outside };
    }
    case 'beamSplitter': {
      const inner = ensembleOf(state.state, resolution);
      const kets = splitKets(inner.kets, state.transmittance, state.direction);
      return { ...inner, kets, noise: inner.noise + 2 * EPS };
    }
    case 'phaseShift': {
      const inner = ensembleOf(state.state, resolution);
      return { ...inner, kets: inner.kets.map((ket) => shiftKet(ket, state.mode, state.direction)) };
    }
    case 'lose':
    case 'amplify': {
      const { channels, inner } = channelsOf(state);
      return channels.reduce(
        (ensemble, channel) => throughChannel(ensemble, channel, () => resolve(state, resolution)),
        ensembleOf(inner, resolution),
      );
    }
    case 'displaced': {
      const inner = ensembleOf(state.state, beforeMixing(resolution));
      const { levels, outside } = resolve(state, resolution);
      checkUnitary(inner, levels);
      if (abs2(state.alpha) === 0) return inner;
      return onMode(inner, state.mode, displacement(state.alpha, inner.levels, levels), levels, outside);
    }
    case 'squeeze': {
      const inner = ensembleOf(state.state, beforeMixing(resolution));
      const { levels, outside } = resolve(state, resolution);
      checkUnitary(inner, levels);
      if (state.r === 0) return inner;
      return onMode(inner, state.mode, squeezer(state.r, state.direction, inner.levels, levels), levels, outside);
    }
    case 'twoModeSqueeze': {
      // Two squeezers between two balanced splitters.
      const finer = beforeMixing(resolution);
      const inner = ensembleOf(state.state, finer);
      if (state.r === 0) return inner;
      const { levels, outside } = resolve(state, finer);
      checkUnitary(inner, levels);
      const mixed = { ...inner, kets: splitKets(inner.kets, 0.5, complex(1)) };
      // In between the two modes are as wide as the result is: the total bound holds for both.
      const one = onMode(
        mixed,
        1,
        squeezer(state.r, times(state.direction, -1), mixed.levels, levels),
        levels,
        outside,
      );
      const two = onMode(one, 2, squeezer(state.r, state.direction, one.levels, levels), levels, outside);
      return { ...two, kets: splitKets(two.kets, 0.5, complex(-1)) };
    }
    case 'mixture': {
      const likely = likelyParts(state);
      const parts = equallyWide(ensembleOf, likely, resolution).map((inner, index) => ({
        inner,
        probability: likely[index]!.probability,
      }));
      return {
        kind: 'ensemble',
        kets: parts.flatMap(({ inner, probability }) =>
          inner.kets.map((ket) => combineKets([ket], [complex(Math.sqrt(probability))], inner.levels)),
        ),
        levels: Math.max(...parts.map(({ inner }) => inner.levels)),
        noise: Math.max(...parts.map(({ inner }) => inner.noise)),
        outside: parts.reduce((sum, { inner, probability }) => sum + probability * inner.outside, 0),
      };
    }
    case 'superposition':
      return superposed(state, resolution);
    default:
      throw new MethodDoesNotApply('a state of one mode is not one of two');
  }
}

type JointSuperposition = Extract<State, { readonly kind: 'superposition' }>;

function superposed(state: JointSuperposition, resolution: Resolution): Ensemble {
  const attempt = (finer: Resolution) => {
    const terms = state.terms.filter((term) => abs2(term.amplitude) > 0);
    const parts = equallyWide(ensembleOf, terms, finer).map((inner, index) => ({
      inner,
      amplitude: terms[index]!.amplitude,
    }));
    const kets = parts.map(({ inner }) => {
      const [only, ...others] = inner.kets;
      if (only === undefined || others.length > 0) throw new MethodDoesNotApply('not a ket in the number basis');
      return only;
    });
    const levels = Math.max(1, ...parts.map(({ inner }) => inner.levels));
    const ket = combineKets(
      kets,
      parts.map(({ amplitude }) => amplitude),
      levels,
    );
    const reference = parts.reduce((sum, { amplitude }) => sum + abs2(amplitude), 0);
    const spread = parts.reduce((sum, { inner, amplitude }) => sum + Math.sqrt(abs2(amplitude) * inner.outside), 0);
    const noise = parts.reduce((most, { inner }) => Math.max(most, inner.noise), EPS);
    return { ket, levels, norm: weightOf(ket), reference, outside: spread * spread, noise };
  };
  let made = attempt(resolution);
  if (!(made.norm > 1e3 * made.noise * made.noise * made.reference)) {
    throw new StateVanishes('the norm vanishes to rounding');
  }
  if (made.outside / made.norm > 1.01 * Math.exp(resolution.logWeight)) {
    made = attempt({
      ...resolution,
      logWeight: resolution.logWeight + Math.log(made.norm / (made.reference * state.terms.length)),
    });
  }
  const scale = 1 / Math.sqrt(made.norm);
  return {
    kind: 'ensemble',
    kets: [combineKets([made.ket], [complex(scale)], made.levels)],
    levels: made.levels,
    noise: made.noise * scale * Math.sqrt(made.reference),
    outside: made.outside / made.norm,
  };
}

/** A joint state as kets in blocks; a factored one is multiplied out. */
export const ensembleOf = builtOnce((state, resolution): Ensemble => {
  const joint = jointState(state, resolution);
  return joint.kind === 'ensemble' ? joint : multipliedOut(joint, resolve(state, resolution));
});
