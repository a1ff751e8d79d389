import type { Complex } from './complex';
import type { Dimension } from './dimension';
import type { Expression } from './expression';

/**
 * What is printed beside an answer field, and all that the reader may know: never a tolerance, a key, a length or a
 * number of modes that the statement does not give.
 */
export type AnswerField =
  | { readonly form: 'number'; readonly hint: 'pure number' | 'with a unit'; readonly unit?: string }
  | { readonly form: 'complex' | 'list' | 'distribution' | 'matrix' | 'state' | 'worked' }
  | { readonly form: 'formula'; readonly variables: readonly FieldVariable[] }
  | { readonly form: 'choice'; readonly labels: readonly string[]; readonly several: boolean };

/** A variable that a formula may use. */
export interface FieldVariable {
  readonly name: string;
  /** KaTeX source; without it the name's own. */
  readonly symbol?: string;
  /** Further spellings that stand for it. */
  readonly spellings?: readonly string[];
}

/** The unit of an answer. */
export interface ReadUnit {
  /** As printed: `s⁻¹`. */
  readonly text: string;
  readonly dimension: Dimension;
  /** Size of the unit in coherent SI units. */
  readonly factor: number;
}

interface Read {
  /** What the read-back line prints. */
  readonly readAs: string;
  /** What was left out of the answer, as typed: `P =`. */
  readonly dropped?: string;
  /** What the read-back adds: a question or a remark that does not stop the answer. */
  readonly note?: string;
}

/** A photon-number component of a state: the photons of each mode and the amplitude. */
export interface KetComponent {
  readonly photons: readonly number[];
  readonly amplitude: Complex;
}

/** A coherent component of a state of one mode. */
export interface CoherentComponent {
  readonly alpha: Complex;
  readonly amplitude: Complex;
}

/** How an answer was read. */
export type Reading =
  | { readonly kind: 'empty' }
  | (Read & {
      readonly kind: 'number';
      /** In the unit as typed; in no unit where there is none. */
      readonly value: number;
      readonly unit?: ReadUnit;
      /** In coherent SI units. */
      readonly si: number;
    })
  | (Read & { readonly kind: 'complex'; readonly value: Complex; readonly unit?: ReadUnit })
  | (Read & { readonly kind: 'list'; readonly entries: readonly Complex[]; readonly unit?: ReadUnit })
  | (Read & {
      readonly kind: 'matrix';
      readonly rows: readonly (readonly Complex[])[];
      readonly unit?: ReadUnit;
      readonly typeset: string;
    })
  | (Read & {
      readonly kind: 'state';
      readonly modes: number;
      readonly kets: readonly KetComponent[];
      readonly coherent: readonly CoherentComponent[];
      readonly norm: number;
      readonly typeset: string;
    })
  | (Read & { readonly kind: 'formula'; readonly expression: Expression; readonly typeset: string })
  | (Read & { readonly kind: 'choice'; readonly labels: readonly string[] })
  | (Read & { readonly kind: 'worked'; readonly text: string })
  | {
      readonly kind: 'question';
      /** A question that only the student can answer. */
      readonly question: string;
      /** Ways to write it that leave no question; `text` replaces the whole answer. */
      readonly choices: readonly { readonly label: string; readonly text: string }[];
      readonly at: number;
    }
  | {
      readonly kind: 'unreadable';
      readonly problem: string;
      /** The place of the first character that could not be read, counted from 1. */
      readonly at?: number;
    };

export type ReadingOf<Kind extends Reading['kind']> = Extract<Reading, { kind: Kind }>;
