import { compareMethods } from './compare-methods';
import { defaultConvention } from './convention';
import { figureByMethods } from './figure-by-methods';
import { figureFunctions } from './figures';
import { channelOf, type Amplify, type Damp, type Invert, type Lose, type State } from './state';
import { phase } from './complex';

/** One way to lose or gain light. */
type Passage = Damp | Amplify | Invert | Lose;

/** Where the mean amplitude of a state is, and how far the state spreads around it. */
export interface PathPoint {
  /** ⟨x⟩ and ⟨p⟩, ħ = 1, vacuum variance 1/2. */
  readonly x: number;
  readonly p: number;
  /** √((Var x + Var p)/2): the radius of the circle of the spread; √½ for a coherent state. */
  readonly spread: number;
}

/** The way of a state's amplitude through damping, amplification, inversion and loss. */
export interface AmplitudePath {
  /** What happened, in order. */
  readonly passages: readonly Passage['kind'][];
  /** From the state before the first of them to the state itself. */
  readonly points: readonly PathPoint[];
}

const leastPoints = 48;
const mostPoints = 600;
/** Largest turn between two points, in radians. */
const finestTurn = 0.12;

/**
 * The path of a state's amplitude while it is damped, amplified, inverted or loses light, with the spread around it.
 *
 * Formula: ⟨a⟩ → √g e^{iφ} ⟨a⟩ and V → g V + N with V = ⟨n⟩ − |⟨a⟩|²; (Var x + Var p)/2 = V + 1/2. On the way a time t
 * is s·t, a gain G is G^s and a transmissivity η is η^s, for s from 0 to 1.
 *
 * @param state a state of one mode
 * @returns undefined where nothing of the kind happened to it last
 * @throws MethodDoesNotApply or OpticsError where the state before has no mean amplitude that can be computed
 */
export function amplitudePath(state: State): AmplitudePath | undefined {
  const passages: Passage[] = [];
  let before = state;
  while (isPassage(before) && before.modes === 1) {
    passages.unshift(before);
    before = before.state;
  }
  if (passages.length === 0) return undefined;
  const { x, p, spread } = startOf(before);
  const points: PathPoint[] = [{ x, p, spread }];
  for (const passage of passages) {
    const from = points.at(-1) ?? { x, p, spread };
    const start = spread2(from) - 0.5;
    const steps = Math.min(mostPoints, Math.max(leastPoints, Math.ceil(Math.abs(turnOf(passage)) / finestTurn)));
    for (let step = 1; step <= steps; step++) {
      const { gain, noise, rotation } = channelOf(partOf(passage, step / steps));
      const turn = phase(rotation);
      const size = Math.sqrt(gain);
      points.push({
        x: size * (from.x * turn.re - from.p * turn.im),
        p: size * (from.x * turn.im + from.p * turn.re),
        spread: Math.sqrt(Math.max(0, gain * start + noise) + 0.5),
      });
    }
  }
  return { passages: passages.map(({ kind }) => kind), points };
}

const spread2 = ({ spread }: PathPoint): number => spread * spread;

function isPassage(state: State): state is Passage {
  return state.kind === 'damp' || state.kind === 'amplify' || state.kind === 'invert' || state.kind === 'lose';
}

const turnOf = (passage: Passage): number => channelOf(passage).rotation;

/** The same passage when the part s of it is over. */
function partOf(passage: Passage, s: number): Passage {
  switch (passage.kind) {
    case 'damp':
    case 'invert':
      return { ...passage, t: passage.t * s };
    case 'amplify':
      return { ...passage, gain: passage.gain ** s };
    case 'lose':
      return { ...passage, eta: passage.eta ** s };
  }
}

function startOf(state: State): PathPoint {
  const value = (name: 'amplitude' | 'meanPhotons') =>
    compareMethods(name, figureByMethods(figureFunctions[name]([state], defaultConvention))).value;
  const mean = value('amplitude');
  const photons = value('meanPhotons');
  const [re, im] = typeof mean === 'object' && 're' in mean ? [mean.re, mean.im] : [Number(mean), 0];
  const around = Math.max(0, Number(photons) - re * re - im * im);
  return { x: Math.SQRT2 * re, p: Math.SQRT2 * im, spread: Math.sqrt(around + 0.5) };
}
