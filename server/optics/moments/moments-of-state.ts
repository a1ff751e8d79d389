import { abs, abs2, complex, conjugate, exponential, multiply, phase, times, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import { binomial, fallingFactorial, logFactorial } from '../special/factorials';
import { channelOf, type State, type Superposition } from '../state';
import { StateMemo } from '../state-memo';
import { addedMoments, splitMoments, squeezedMoments } from './moment-maps';
import { exact, power, quotient, scaled, Sum, type Raw } from './moment-sums';
import { productTermsOf, type ModeKet, type ProductTerm } from './product-terms';
import type { Moment, MomentSource } from './moment-figures';

/** Highest power of one a or a† that is carried: its factorials stay far inside the range of numbers. */
const HIGHEST_POWER = 80;
const EPS = 2 ** -52;

const cache = new StateMemo<MomentSource>();
const ZERO_MOMENT: Moment = { value: complex(0), error: 0 };

/**
 * The normally ordered moments ⟨a₁†ᵖ a₁^q a₂†ʳ a₂ˢ⟩ of a state, carried exactly through splitters, losses, amplifiers,
 * displacements and squeezers from closed forms of the input.
 *
 * @returns a function of (p, q, r, s) that remembers what it has found
 * @throws MethodDoesNotApply (on use) for states whose moments have no such form
 */
export function momentsOf(state: State): MomentSource {
  const known = cache.get(state);
  if (known !== undefined) return known;
  const remembered = remember(build(state));
  cache.set(state, remembered);
  return remembered;
}

/** Keeps what has been found: deep trees would ask for the same moments again and again. */
function remember(raw: Raw): MomentSource {
  const seen = new Map<number, Moment>();
  return (p, q, r = 0, s = 0) => {
    if (Math.max(p, q, r, s) > HIGHEST_POWER) throw new MethodDoesNotApply('the order of the moment is too high');
    const key = ((p * 100 + q) * 100 + r) * 100 + s;
    let moment = seen.get(key);
    if (moment === undefined) {
      moment = p + q + r + s === 0 ? { value: complex(1), error: 0 } : raw(p, q, r, s);
      if (!Number.isFinite(moment.value.re) || !Number.isFinite(moment.value.im)) {
        throw new MethodDoesNotApply('the moment is beyond the range of numbers');
      }
      seen.set(key, moment);
    }
    return moment;
  };
}

function build(state: State): Raw {
  switch (state.kind) {
    case 'fock':
      return (p, q) => (p === q ? exact(complex(fallingFactorial(state.n, p))) : ZERO_MOMENT);
    case 'coherent':
      return (p, q) => exact(multiply(power(conjugate(state.alpha), p), power(state.alpha, q)));
    case 'thermal':
      return (p, q) => (p === q ? exact(complex(Math.exp(logFactorial(p)) * state.nbar ** p)) : ZERO_MOMENT);
    case 'squeezed': {
      const sinh = Math.sinh(state.r);
      const pair = times(state.direction, -sinh * Math.cosh(state.r));
      return (p, q) => {
        const sum = new Sum();
        for (let j = p % 2; j <= Math.min(p, q); j += 2) {
          if ((q - j) % 2 !== 0) continue;
          const u = (p - j) / 2;
          const v = (q - j) / 2;
          const ways = Math.exp(
            logFactorial(p) +
              logFactorial(q) -
              logFactorial(j) -
              logFactorial(u) -
              logFactorial(v) -
              (u + v) * Math.LN2,
          );
          const whole = p + q <= 40 ? Math.round(ways) : ways;
          sum.add(complex(whole * (sinh * sinh) ** j), exact(multiply(power(conjugate(pair), u), power(pair, v))));
        }
        return sum.moment;
      };
    }
    case 'cat':
      return catMoments(state.alpha, state.theta);
    case 'displaced': {
      const inner = momentsOf(state.state);
      const { alpha, mode } = state;
      return (p, q, r, s) => {
        const sum = new Sum();
        const [up, down] = mode === 1 ? [p, q] : [r, s];
        for (let j = 0; j <= up; j++) {
          for (let k = 0; k <= down; k++) {
            const factor = times(
              multiply(power(conjugate(alpha), up - j), power(alpha, down - k)),
              binomial(up, j) * binomial(down, k),
            );
            sum.add(factor, mode === 1 ? inner(j, k, r, s) : inner(p, q, j, k));
          }
        }
        return sum.moment;
      };
    }
    case 'squeeze':
      return squeezedMoments(momentsOf(state.state), state.mode, state.r, state.direction);
    case 'mixture': {
      const parts = state.states.map((part) => momentsOf(part));
      return (p, q, r, s) => {
        const sum = new Sum();
        state.probabilities.forEach((probability, index) => {
          const part = parts[index];
          if (probability > 0 && part !== undefined) sum.add(complex(probability), part(p, q, r, s));
        });
        return sum.moment;
      };
    }
    case 'phaseAveraged': {
      const inner = momentsOf(state.state);
      return (p, q) => (p === q ? inner(p, q) : ZERO_MOMENT);
    }
    case 'dephased': {
      const inner = momentsOf(state.state);
      return (p, q) => scaled(inner(p, q), complex(Math.exp((-(state.sigma ** 2) * (p - q) ** 2) / 2)));
    }
    case 'photonSubtracted': {
      const inner = momentsOf(state.state);
      const { k } = state;
      return (p, q) => quotient(inner(p + k, q + k), inner(k, k));
    }
    case 'photonAdded': {
      const added = addedMoments(momentsOf(state.state), state.k);
      return (p, q) => quotient(added(p, q), added(0, 0));
    }
    case 'product': {
      const first = momentsOf(state.first);
      const second = momentsOf(state.second);
      return (p, q, r, s) => {
        const left = first(p, q);
        if (left.value.re === 0 && left.value.im === 0 && left.error === 0) return ZERO_MOMENT;
        const right = second(r, s);
        const value = multiply(left.value, right.value);
        return {
          value,
          error:
            left.error * abs(right.value) + right.error * abs(left.value) + left.error * right.error + EPS * abs(value),
        };
      };
    }
    case 'twinBeam': {
      const sinh = Math.sinh(state.r);
      const pair = times(state.direction, sinh * Math.cosh(state.r));
      return (p, q, r, s) => {
        const sum = new Sum();
        if (p - q !== r - s) return ZERO_MOMENT;
        for (let j = 0; j <= Math.min(p, q); j++) {
          const u = p - j;
          const v = q - j;
          const k = r - u;
          if (k < 0 || k !== s - v) continue;
          const ways = Math.exp(
            [p, q, r, s].reduce((total, n) => total + logFactorial(n), 0) -
              [j, k, u, v].reduce((total, n) => total + logFactorial(n), 0),
          );
          const whole = p + q + r + s <= 30 ? Math.round(ways) : ways;
          sum.add(
            complex(whole * (sinh * sinh) ** (j + k)),
            exact(multiply(power(conjugate(pair), u), power(pair, v))),
          );
        }
        return sum.moment;
      };
    }
    case 'twoModeSqueeze': {
      // Two squeezers between two balanced splitters.
      const mixed = remember(splitMoments(momentsOf(state.state), 0.5, complex(1)));
      const one = remember(squeezedMoments(mixed, 1, state.r, times(state.direction, -1)));
      const two = remember(squeezedMoments(one, 2, state.r, state.direction));
      return splitMoments(two, 0.5, complex(-1));
    }
    case 'beamSplitter':
      return splitMoments(momentsOf(state.state), state.transmittance, state.direction);
    case 'phaseShift': {
      const inner = momentsOf(state.state);
      const back = conjugate(state.direction);
      return (p, q, r, s) => {
        const [up, down] = state.mode === 1 ? [p, q] : [r, s];
        return scaled(inner(p, q, r, s), multiply(power(back, up), power(state.direction, down)));
      };
    }
    case 'lose':
    case 'damp':
    case 'amplify':
    case 'invert': {
      const inner = momentsOf(state.state);
      const { gain, noise, rotation, mode } = channelOf(state);
      const direction = phase(rotation);
      const root = Math.sqrt(gain);
      return (p, q, r, s) => {
        const sum = new Sum();
        const [up, down] = mode === 1 ? [p, q] : [r, s];
        const most = noise === 0 ? 0 : Math.min(up, down);
        for (let k = 0; k <= most; k++) {
          const ways = binomial(up, k) * binomial(down, k) * Math.exp(logFactorial(k)) * noise ** k;
          const size = ways * gain ** ((up + down - 2 * k) >> 1) * ((up + down) % 2 === 1 ? root : 1);
          const turn = multiply(power(conjugate(direction), up - k), power(direction, down - k));
          sum.add(times(turn, size), mode === 1 ? inner(up - k, down - k, r, s) : inner(p, q, up - k, down - k));
        }
        return sum.moment;
      };
    }
    case 'output': {
      const inner = momentsOf(state.state);
      return state.mode === 1 ? (p, q) => inner(p, q, 0, 0) : (p, q) => inner(0, 0, p, q);
    }
    case 'superposition':
      return superposedMoments(state);
    case 'heralded':
    case 'clicked':
      return () => {
        throw new MethodDoesNotApply('a conditioned state has no polynomial form');
      };
  }
}

/** ∝ |α⟩ + e^{iθ}|−α⟩, without cancellation at small |α|. */
function catMoments(alpha: Complex, theta: number): Raw {
  const mean = abs2(alpha);
  const overlap = Math.exp(-2 * mean);
  const cos = Math.cos(theta);
  const half = Math.cos(theta / 2);
  const halfSine = Math.sin(theta / 2);
  const lost = Math.expm1(-2 * mean);
  // 1 + cos θ e^{−2|α|²} and 1 − cos θ e^{−2|α|²}.
  const norm = 2 * half * half + cos * lost;
  const flipped = 2 * halfSine * halfSine - cos * lost;
  return (p, q) => {
    const field = multiply(power(conjugate(alpha), p), power(alpha, q));
    if ((p + q) % 2 === 0) return exact(times(field, p % 2 === 0 ? 1 : flipped / norm));
    const sign = q % 2 === 0 ? 1 : -1;
    return exact(multiply(field, complex(0, (sign * Math.sin(theta) * overlap) / norm)));
  };
}

/** Moments of a superposition of products of number states and coherent states. */
function superposedMoments(state: Superposition): Raw {
  let terms: readonly ProductTerm[] | undefined;
  let norm: Moment | undefined;
  const unnormalised = (p: number, q: number, r: number, s: number): Moment => {
    terms ??= productTermsOf(state);
    const sum = new Sum();
    for (const bra of terms) {
      for (const ket of terms) {
        const first = crossMoment(bra.kets[0], ket.kets[0], p, q);
        if (first.re === 0 && first.im === 0) continue;
        const second = ket.kets[1] === undefined ? complex(1) : crossMoment(bra.kets[1]!, ket.kets[1], r, s);
        const weight = multiply(conjugate(bra.amplitude), ket.amplitude);
        sum.add(weight, exact(multiply(first, second)));
      }
    }
    return sum.moment;
  };
  return (p, q, r, s) => {
    norm ??= unnormalised(0, 0, 0, 0);
    return quotient(unnormalised(p, q, r, s), norm);
  };
}

/** ⟨bra|a†ᵖ a^q|ket⟩ of number states and coherent states. */
function crossMoment(bra: ModeKet, ket: ModeKet, p: number, q: number): Complex {
  if ('alpha' in ket) {
    if ('alpha' in bra) {
      const exponent = multiply(conjugate(bra.alpha), ket.alpha);
      const overlap = exponential({ re: exponent.re - (abs2(bra.alpha) + abs2(ket.alpha)) / 2, im: exponent.im });
      return multiply(multiply(power(conjugate(bra.alpha), p), power(ket.alpha, q)), overlap);
    }
    return numberWithCoherent(bra.n, ket.alpha, p, q);
  }
  if ('alpha' in bra) return conjugate(numberWithCoherent(ket.n, bra.alpha, q, p));
  if (ket.n < q || bra.n < p || ket.n - q !== bra.n - p) return complex(0);
  return complex(Math.sqrt(fallingFactorial(ket.n, q)) * Math.sqrt(fallingFactorial(bra.n, p)));
}

/** ⟨n|a†ᵖ a^q|α⟩ = α^q √(n!/(n − p)!) α^{n−p} e^{−|α|²/2}/√(n − p)!. */
function numberWithCoherent(n: number, alpha: Complex, p: number, q: number): Complex {
  if (n < p) return complex(0);
  const size = abs(alpha);
  const left = n - p;
  if (size === 0) return left + q === 0 ? complex(Math.sqrt(fallingFactorial(n, p))) : complex(0);
  const logSize = (left + q) * Math.log(size) + (logFactorial(n) / 2 - logFactorial(left)) - (size * size) / 2;
  return times(phase(Math.atan2(alpha.im, alpha.re) * (left + q)), Math.exp(logSize));
}
