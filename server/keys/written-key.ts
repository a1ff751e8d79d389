import { isComplex } from './value';
import type { CompiledKey } from './compile-key';
import { evaluateKey, evaluateState, type KeyResult } from './evaluate-key';
import { KeyError } from './key-error';
import { stateComponents, type StateComponents } from './state-components';
import { stateText } from './state-text';
import { pictureOf, type StatePicture, type PictureWanted } from './state-picture';
import type { PlainValue, Value } from './value';

/** The values of a formula at the points where answers are compared with it; null where it is undefined. */
export interface FormulaValues {
  readonly atPoints: readonly ({ readonly re: number; readonly im: number } | null)[];
}

/** What an expression is to come to where that is more than a number or a list of numbers. */
export type Wanted =
  | { readonly kind: 'state' }
  | {
      readonly kind: 'formula';
      /** Values of its variables, point by point; they win over givens of the same name. */
      readonly points: readonly Readonly<Record<string, number>>[];
      /** After so many points where it is defined the rest are left out. */
      readonly enough: number;
    }
  | PictureWanted;

/** A key that is a state or a formula: in words, with what answers are compared with. */
export interface WrittenKey extends Omit<KeyResult, 'value'> {
  readonly value: string;
  /** KaTeX. */
  readonly typeset?: string;
  readonly compared?: StateComponents | FormulaValues;
  readonly picture?: StatePicture;
}

/** Evaluates a compiled expression to what is wanted. @throws KeyError where it has no such value */
export function evaluateWanted(compiled: CompiledKey, values: ReadonlyMap<string, Value>, wanted: Wanted): WrittenKey {
  switch (wanted.kind) {
    case 'state': {
      const compared = stateComponents(evaluateState(compiled, values));
      const { plain, typeset } = stateText(compared);
      return { value: plain, typeset, method: 'number basis', compared };
    }
    case 'formula':
      return evaluateFormula(compiled, values, wanted);
    case 'picture':
      return { value: '', method: 'number basis', picture: pictureOf(compiled, values, wanted) };
  }
}

function evaluateFormula(
  compiled: CompiledKey,
  values: ReadonlyMap<string, Value>,
  { points, enough }: Extract<Wanted, { kind: 'formula' }>,
): WrittenKey {
  let fault: KeyError | undefined;
  let weakest: KeyResult | undefined;
  let defined = 0;
  const atPoints = points.map((point) => {
    if (defined >= enough) return null;
    try {
      const result = evaluateKey(compiled, new Map([...values, ...Object.entries(point)]));
      if (result.unit !== undefined) throw new KeyError('A formula has no unit; divide by it.', null);
      const number = complexOf(result.value);
      defined += 1;
      if (!weakest || (result.agreesTo ?? 99) < (weakest.agreesTo ?? 99)) weakest = result;
      return number;
    } catch (error) {
      // Undefined at this point: another stands in for it.
      if (!(error instanceof KeyError)) throw error;
      fault ??= error;
      return null;
    }
  });
  if (!weakest)
    throw fault ?? new KeyError('The formula is undefined everywhere in the ranges of its variables.', null);
  const { method, agreesTo } = weakest;
  return {
    value: compiled.expression,
    method,
    ...(agreesTo === undefined ? {} : { agreesTo }),
    compared: { atPoints },
  };
}

function complexOf(value: PlainValue): { readonly re: number; readonly im: number } {
  if (typeof value === 'number') return { re: value, im: 0 };
  if (isComplex(value) || 're' in value) return { re: value.re, im: value.im };
  throw new KeyError('A formula comes to a number; this comes to a list.', null);
}
