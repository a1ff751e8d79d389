import { divide, isFiniteComplex, modulus, multiply, one, real, zero, type Complex } from './complex';
import { dropLeadingName } from './dropped-name';
import { contains, type Expression } from './expression';
import type { Grammar } from './grammar';
import { parseExpression } from './parser';
import { negligible, printComplex } from './print';
import { ReadingProblem } from './problem';
import { evaluateNumber } from './quantity';
import type { Reading } from './reading';
import {
  added,
  catState,
  coherentState,
  isFiniteState,
  joined,
  ketState,
  normOf,
  scaled,
  type Superposition,
} from './superposition';
import { texComplex } from './typeset';

const stateGrammar: Grammar = { comma: 'decimal', units: false, kets: true, variables: new Map() };

/** Most photons of one mode of a ket, most components of a state, largest |α|² of a coherent state. */
const mostPhotons = 16_383;
const mostComponents = 400;
const mostCoherentPhotons = 10_000;

const isState = (node: Expression): boolean => contains(node, 'ket', 'state');

function photonNumber(node: Expression | undefined): number {
  const value = node ? evaluateNumber(node) : zero;
  if (value.im !== 0 || !Number.isInteger(value.re) || value.re < 0 || value.re > mostPhotons) {
    throw new ReadingProblem(`A photon number is a whole number from 0 to ${mostPhotons}.`, node?.at);
  }
  return value.re;
}

function amplitudeArgument(node: Expression | undefined): Complex {
  const value = node ? evaluateNumber(node) : zero;
  if (!isFiniteComplex(value)) throw new ReadingProblem('The amplitude of a coherent state is not finite.', node?.at);
  if (modulus(value) ** 2 > mostCoherentPhotons) {
    throw new ReadingProblem('The amplitude of a coherent state is too large to be compared.', node?.at);
  }
  return value;
}

function namedState(node: Extract<Expression, { type: 'state' }>): Superposition {
  const [first, second] = node.arguments;
  switch (node.name) {
    case 'vacuum':
      return ketState([0]);
    case 'coherent':
      return coherentState(amplitudeArgument(first));
    case 'cat': {
      const state = catState(amplitudeArgument(first), second ? evaluateNumber(second) : zero);
      if (!state) throw new ReadingProblem('This cat state vanishes.', node.at);
      return state;
    }
    default:
      return ketState(node.arguments.map(photonNumber));
  }
}

function sumOf(a: Superposition, b: Superposition, at: number): Superposition {
  if (a.modes !== b.modes) throw new ReadingProblem('The kets of a sum must have the same number of modes.', at);
  const sum = added(a, b);
  if (sum.kets.length + sum.coherent.length > mostComponents)
    throw new ReadingProblem('The state has too many components.', at);
  return sum;
}

/** The state that an expression stands for. */
function stateOf(node: Expression): Superposition {
  switch (node.type) {
    case 'ket':
      return ketState(
        node.photons.map((photons) => photonNumber({ type: 'number', value: photons, digits: '', at: node.at })),
      );
    case 'state':
      return namedState(node);
    case 'negative':
      return scaled(stateOf(node.argument), real(-1));
    case 'binary':
      return operation(node);
    default:
      throw new ReadingProblem('A ket has no place inside a function, a power or a factorial.', node.at);
  }
}

function operation(node: Extract<Expression, { type: 'binary' }>): Superposition {
  const { operator, left, right } = node;
  const [leftIsState, rightIsState] = [isState(left), isState(right)];
  if (operator === '+' || operator === '-') {
    if (!leftIsState || !rightIsState) {
      throw new ReadingProblem('A number cannot be added to a ket.', (leftIsState ? right : left).at);
    }
    return sumOf(stateOf(left), scaled(stateOf(right), real(operator === '+' ? 1 : -1)), right.at);
  }
  if (operator === '*' && leftIsState && rightIsState) return product(stateOf(left), stateOf(right), right.at);
  if (operator === '*') {
    return leftIsState ? scaled(stateOf(left), evaluateNumber(right)) : scaled(stateOf(right), evaluateNumber(left));
  }
  if (operator === '/' && !rightIsState) return scaled(stateOf(left), divide(one, evaluateNumber(right)));
  throw new ReadingProblem(
    operator === '/' ? 'A ket cannot stand below a fraction line.' : 'A ket cannot be raised to a power.',
    right.at,
  );
}

function product(a: Superposition, b: Superposition, at: number): Superposition {
  if (a.coherent.length > 0 || b.coherent.length > 0) {
    throw new ReadingProblem('Only kets of photon numbers can be multiplied with each other.', at);
  }
  if (a.modes + b.modes > 8 || a.kets.length * b.kets.length > mostComponents) {
    throw new ReadingProblem('The state has too many components.', at);
  }
  return joined(a, b);
}

interface Term {
  readonly amplitude: Complex;
  readonly plain: string;
  readonly tex: string;
}

function termsOf(state: Superposition): readonly Term[] {
  const terms = [
    ...state.kets.map(({ photons, amplitude }) => ({
      amplitude,
      plain: `|${photons.join(',')}⟩`,
      tex: `|${photons.join(',')}\\rangle`,
    })),
    ...state.coherent.map(({ alpha, amplitude }) => ({
      amplitude,
      plain: `|α = ${printComplex(alpha, 4)}⟩`,
      tex: `|\\alpha = ${texComplex(alpha)}\\rangle`,
    })),
  ];
  const largest = Math.max(...terms.map(({ amplitude }) => modulus(amplitude)));
  return terms.filter(({ amplitude }) => modulus(amplitude) > 1e-12 * largest);
}

/** A part of an amplitude that is rounding beside the other is not shown. */
const clean = ({ re, im }: Complex): Complex => ({ re: negligible(re, im) ? 0 : re, im: negligible(im, re) ? 0 : im });

function joinTerms(
  terms: readonly Term[],
  show: (amplitude: Complex) => string,
  ket: (term: Term) => string,
  minus: string,
): string {
  return terms
    .map((term, index) => {
      const amplitude = clean(term.amplitude);
      const both = amplitude.re !== 0 && amplitude.im !== 0;
      const negative = !both && (amplitude.re < 0 || amplitude.im < 0);
      const size = show(negative ? multiply(amplitude, real(-1)) : amplitude);
      const factor = both ? `(${size})` : size === '1' ? '' : size;
      const sign = index === 0 ? (negative ? minus : '') : negative ? ` ${minus} ` : ' + ';
      return `${sign}${factor}${factor && minus === '-' ? '\\,' : ''}${ket(term)}`;
    })
    .join('');
}

/** Reads a state in Dirac notation: number kets, and coherent and cat states written by name. */
export function readState(text: string): Reading {
  const undressed = dropLeadingName(text, stateGrammar);
  const node = parseExpression(undressed.text, stateGrammar);
  if (!isState(node)) throw new ReadingProblem('There is no ket; write a state such as (|0⟩ + i|1⟩)/√2.', node.at);
  const state = stateOf(node);
  if (!isFiniteState(state)) throw new ReadingProblem('An amplitude of the state is not finite.', node.at);
  const norm = normOf(state);
  const scale = Math.max(...[...state.kets, ...state.coherent].map(({ amplitude }) => modulus(amplitude)));
  if (!(norm > 1e-12 * scale) || !Number.isFinite(norm))
    throw new ReadingProblem('The state is zero or too large to be compared.', node.at);
  const terms = termsOf(state);
  return {
    kind: 'state',
    modes: state.modes,
    kets: state.kets,
    coherent: state.coherent,
    norm,
    readAs: joinTerms(
      terms,
      (amplitude) => printComplex(amplitude, 4),
      ({ plain }) => plain,
      '−',
    ),
    typeset: joinTerms(
      terms,
      (amplitude) => texComplex(amplitude),
      ({ tex }) => tex,
      '-',
    ),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
  };
}
