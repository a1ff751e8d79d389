import type { StateAmplitude, StateComponents, StateElement } from './state-components';

/** A state in Dirac notation, as plain text and as KaTeX. */
export interface StateText {
  readonly plain: string;
  readonly typeset: string;
}

interface Term {
  readonly re: number;
  readonly im: number;
  readonly plain: string;
  readonly typeset: string;
}

/** Most components that are written out; the rest is said to be there. */
const mostTerms = 6;
const figures = 4;

/**
 * A state in Dirac notation, its largest components first in the order of photon numbers; components below 10⁻⁹ of the
 * largest are left out.
 */
export function stateText(state: StateComponents): StateText {
  if ('amplitudes' in state) return written(state.amplitudes.map(ketTerm));
  if ('elements' in state) return written(state.elements.map(elementTerm));
  const texts = state.kets.slice(0, 3).map((ket) => written(ket.map(ketTerm)));
  const more = state.kets.length > texts.length;
  return {
    plain: `a mixture of ${texts.map(({ plain }) => plain).join(' and ')}${more ? ' and more' : ''}`,
    typeset: `\\text{mixture of }${texts.map(({ typeset }) => typeset).join('\\text{ and }')}${more ? ',\\,\\ldots' : ''}`,
  };
}

function ketTerm({ photons, re, im }: StateAmplitude): Term {
  return { re, im, plain: `|${photons.join(',')}⟩`, typeset: `|${photons.join(',')}\\rangle` };
}

function elementTerm({ row, column, re, im }: StateElement): Term {
  return {
    re,
    im,
    plain: `|${row.join(',')}⟩⟨${column.join(',')}|`,
    typeset: `|${row.join(',')}\\rangle\\langle ${column.join(',')}|`,
  };
}

function written(all: readonly Term[]): StateText {
  const size = (term: Term) => Math.hypot(term.re, term.im);
  const largest = all.reduce((most, term) => Math.max(most, size(term)), 0);
  const seen = all.filter((term) => size(term) > 1e-9 * largest);
  const kept = new Set([...seen].sort((one, other) => size(other) - size(one)).slice(0, mostTerms));
  const terms = seen.filter((term) => kept.has(term));
  const more = seen.length > terms.length;
  return {
    plain: joined(terms, 'plain') + (more ? ' + …' : ''),
    typeset: joined(terms, 'typeset') + (more ? '+\\cdots' : ''),
  };
}

function joined(terms: readonly Term[], as: 'plain' | 'typeset'): string {
  return terms
    .map((term, index) => {
      const { negative, factor } = factorOf(term, as);
      const sign = negative ? (as === 'plain' ? '−' : '-') : index === 0 ? '' : '+';
      const spaced = index > 0 && as === 'plain' ? ` ${sign} ` : sign;
      const gap = factor === '' ? '' : as === 'plain' ? ' ' : '\\,';
      return `${spaced}${factor}${gap}${term[as]}`;
    })
    .join('');
}

/** The factor before a ket with its sign; a part that is rounding beside the other is not shown. */
function factorOf({ re, im }: Term, as: 'plain' | 'typeset'): { readonly negative: boolean; readonly factor: string } {
  const isReal = Math.abs(im) <= 1e-12 * Math.abs(re);
  const isImaginary = Math.abs(re) <= 1e-12 * Math.abs(im);
  if (isReal) {
    const text = numberText(Math.abs(re), as);
    return { negative: re < 0, factor: text === '1' ? '' : text };
  }
  if (isImaginary) {
    const text = numberText(Math.abs(im), as);
    return { negative: im < 0, factor: text === '1' ? 'i' : `${text}${as === 'plain' ? '' : '\\,'}i` };
  }
  const sign = im < 0 ? (as === 'plain' ? ' − ' : '-') : as === 'plain' ? ' + ' : '+';
  return { negative: false, factor: `(${numberText(re, as)}${sign}${numberText(Math.abs(im), as)}i)` };
}

function numberText(value: number, as: 'plain' | 'typeset'): string {
  const rounded = Number(value.toPrecision(figures));
  const [digits = '', exponent] = String(
    Math.abs(rounded) < 1e-3 && rounded !== 0 ? rounded.toExponential() : rounded,
  ).split('e');
  const minus = as === 'plain' ? digits.replace('-', '−') : digits;
  if (exponent === undefined) return minus;
  return as === 'plain' ? `${minus}e${exponent.replace('-', '−')}` : `${minus}\\times 10^{${String(Number(exponent))}}`;
}
