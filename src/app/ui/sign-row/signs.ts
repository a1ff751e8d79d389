import type { AnswerField } from '@shared/reading';

/** A sign that can be put into an answer: what stands on its button, what it writes, what it is called. */
export interface Sign {
  readonly label: string;
  /** What is written; the cursor goes where `|` would be said, which is `cursor` characters from the beginning. */
  readonly text: string;
  /** The place of the cursor in what is written; at its end where nothing is said. */
  readonly cursor?: number;
  readonly name: string;
}

const sign = (text: string, name: string, label = text, cursor?: number): Sign => ({
  label,
  text,
  name,
  ...(cursor === undefined ? {} : { cursor }),
});

const root = sign('√()', 'square root', '√', 2);
const pi = sign('π', 'pi');
const times = sign('×', 'times');
const power = sign('^', 'to the power of');
const tenTo = sign('×10^', 'times ten to the power of', '×10ⁿ');
const brackets = sign('()', 'brackets', '( )', 1);
const imaginary = sign('i', 'imaginary unit');
const exponential = sign('e^()', 'e to the power of', 'eˣ', 3);
const ket = sign('|⟩', 'ket', '|⟩', 1);
const closing = sign('⟩', 'end of a ket');
const semicolon = sign('; ', 'next entry', ';');
const minus = sign('−', 'minus');
const micro = sign('µ', 'micro');
const perUnit = sign('⁻¹', 'to the power of minus one');

const greek = [
  ['α', 'alpha'],
  ['β', 'beta'],
  ['γ', 'gamma'],
  ['η', 'eta'],
  ['θ', 'theta'],
  ['κ', 'kappa'],
  ['λ', 'lambda'],
  ['μ', 'mu'],
  ['ν', 'nu'],
  ['σ', 'sigma'],
  ['τ', 'tau'],
  ['φ', 'phi'],
  ['ψ', 'psi'],
  ['ω', 'omega'],
  ['Γ', 'Gamma'],
  ['Δ', 'Delta'],
  ['Ω', 'Omega'],
].map(([letter = '', name = '']) => sign(letter, name));
const letterOf = new Map(greek.map(({ text, name }) => [name, text]));

/** The signs that help with an answer of a form, the likeliest first; of a formula its own variables before all. */
export function signsFor(field: AnswerField): readonly Sign[] {
  switch (field.form) {
    case 'number':
      return field.hint === 'with a unit'
        ? [tenTo, perUnit, micro, root, pi, times, power, brackets, minus]
        : [root, pi, times, tenTo, power, exponential, brackets, minus];
    case 'complex':
      return [imaginary, root, pi, exponential, power, times, brackets, minus];
    case 'list':
    case 'distribution':
      return [semicolon, root, pi, power, tenTo, exponential, brackets, minus];
    case 'matrix':
      return [sign(', ', 'next column', ','), sign('; ', 'next row', ';'), imaginary, root, pi, power, brackets, minus];
    case 'state':
      return [ket, closing, root, imaginary, exponential, pi, sign('α', 'alpha'), brackets, minus];
    case 'formula': {
      const variables = field.variables.map(({ name }) => sign(letterOf.get(name) ?? name, `variable ${name}`));
      const own = new Set(variables.map(({ text }) => text));
      return [
        ...variables,
        root,
        pi,
        power,
        times,
        exponential,
        brackets,
        ...greek.filter(({ text }) => !own.has(text)),
      ];
    }
    case 'worked':
      return [sign('$$', 'formula', '$ $', 1), root, pi, ket, power, times, ...greek];
    case 'choice':
      return [];
  }
}

/** A text with a cursor or a selection in it. */
export interface Edited {
  readonly text: string;
  readonly from: number;
  readonly to: number;
}

/** Writes a sign at the cursor; what is selected goes between its brackets, or gives way to it. */
export function withSign({ text, from, to }: Edited, { text: written, cursor }: Sign): Edited {
  const inside = cursor === undefined ? '' : text.slice(from, to);
  const place = cursor ?? written.length;
  const whole = `${written.slice(0, place)}${inside}${written.slice(place)}`;
  // What was selected is done with, so the cursor goes on behind the bracket.
  const at = from + (inside === '' ? place : whole.length);
  return { text: `${text.slice(0, from)}${whole}${text.slice(to)}`, from: at, to: at };
}
