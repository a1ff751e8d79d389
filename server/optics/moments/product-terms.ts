import { abs2, complex, conjugate, exponential, multiply, phase, times, type Complex } from '../complex';
import { MethodDoesNotApply } from '../method-does-not-apply';
import type { State } from '../state';

/** A number state or a coherent state of one mode. */
export type ModeKet = { readonly n: number } | { readonly alpha: Complex };

/** One product of such states in a superposition. */
export interface ProductTerm {
  readonly amplitude: Complex;
  readonly kets: readonly [ModeKet] | readonly [ModeKet, ModeKet];
}

/** Most products in one superposition: their pairs are summed over. */
const MOST_TERMS = 200;

/**
 * A pure state as a finite superposition of products of number states and coherent states, where it is one.
 *
 * @throws MethodDoesNotApply where it is not
 */
export function productTermsOf(state: State): readonly ProductTerm[] {
  const terms = expand(state);
  if (terms.length > MOST_TERMS) throw new MethodDoesNotApply(`more than ${MOST_TERMS} terms`);
  return terms;
}

const coherentTerm = (alpha: Complex, amplitude: Complex): ProductTerm => ({ amplitude, kets: [{ alpha }] });

function expand(state: State): readonly ProductTerm[] {
  switch (state.kind) {
    case 'fock':
      return [{ amplitude: complex(1), kets: [{ n: state.n }] }];
    case 'coherent':
      return [coherentTerm(state.alpha, complex(1))];
    case 'cat': {
      const half = Math.cos(state.theta / 2);
      const norm = 4 * half * half + 2 * Math.cos(state.theta) * Math.expm1(-2 * abs2(state.alpha));
      const size = 1 / Math.sqrt(norm);
      return [
        coherentTerm(state.alpha, complex(size)),
        coherentTerm(times(state.alpha, -1), times(phase(state.theta), size)),
      ];
    }
    case 'superposition':
      return state.terms.flatMap((term) =>
        productTermsOf(term.state).map((inner) => ({ ...inner, amplitude: multiply(inner.amplitude, term.amplitude) })),
      );
    case 'product': {
      const second = productTermsOf(state.second);
      return productTermsOf(state.first).flatMap((left) =>
        second.map((right) => ({
          amplitude: multiply(left.amplitude, right.amplitude),
          kets: [left.kets[0], right.kets[0]] as const,
        })),
      );
    }
    case 'phaseShift':
      return productTermsOf(state.state).map((term) => {
        let { amplitude } = term;
        const kets = term.kets.map((ket, index): ModeKet => {
          if (index !== state.mode - 1) return ket;
          if ('alpha' in ket) return { alpha: multiply(ket.alpha, state.direction) };
          const turn = Math.atan2(state.direction.im, state.direction.re) * ket.n;
          amplitude = multiply(amplitude, phase(turn));
          return ket;
        });
        return { amplitude, kets: [kets[0]!, ...kets.slice(1)] as unknown as ProductTerm['kets'] };
      });
    case 'displaced':
      return productTermsOf(state.state).map((term) => displaceTerm(term, state.mode - 1, state.alpha));
    case 'beamSplitter':
      return productTermsOf(state.state).map((term) => splitTerm(term, state.transmittance, state.direction));
    default:
      throw new MethodDoesNotApply('a superposition of other than number states and coherent states');
  }
}

/** D(β)|α⟩ = e^{(βα* − β*α)/2}|α + β⟩. */
function displaceTerm(term: ProductTerm, index: number, beta: Complex): ProductTerm {
  const ket = term.kets[index];
  if (ket === undefined) return term;
  const alpha = 'alpha' in ket ? ket.alpha : ket.n === 0 ? complex(0) : undefined;
  if (alpha === undefined) throw new MethodDoesNotApply('a superposition of displaced number states');
  const turn = multiply(beta, conjugate(alpha)).im;
  const moved: ModeKet = { alpha: { re: alpha.re + beta.re, im: alpha.im + beta.im } };
  const kets = term.kets.map((other, at) => (at === index ? moved : other));
  return {
    amplitude: multiply(term.amplitude, exponential(complex(0, turn))),
    kets: kets as unknown as ProductTerm['kets'],
  };
}

/** A splitter takes coherent states to coherent states. */
function splitTerm(term: ProductTerm, transmittance: number, direction: Complex): ProductTerm {
  const [first, second] = term.kets.map((ket) => ('alpha' in ket ? ket.alpha : ket.n === 0 ? complex(0) : undefined));
  if (first === undefined || second === undefined) {
    throw new MethodDoesNotApply('number states in a superposition before a splitter');
  }
  const t = Math.sqrt(transmittance);
  const rho = times(direction, Math.sqrt(1 - transmittance));
  const one = { re: t * first.re, im: t * first.im };
  const two = multiply(rho, second);
  const three = multiply(times(conjugate(rho), -1), first);
  return {
    amplitude: term.amplitude,
    kets: [
      { alpha: { re: one.re + two.re, im: one.im + two.im } },
      { alpha: { re: three.re + t * second.re, im: three.im + t * second.im } },
    ],
  };
}
