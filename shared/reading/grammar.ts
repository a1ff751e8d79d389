import { answerFunctions } from './complex-functions';
import type { CommaRole } from './lex-number';
import { canonicalName } from './names';
import { unitByName } from './units';

/** What an expression may be made of. */
export interface Grammar {
  readonly comma: CommaRole;
  readonly units: boolean;
  readonly kets: boolean;
  /** Variables by canonical spelling, with the name that each stands for. */
  readonly variables: ReadonlyMap<string, string>;
}

/** The states that may be written by name in place of a ket, with how many arguments they take. */
export const namedStates: Readonly<Record<string, readonly [number, number]>> = {
  vacuum: [0, 0],
  fock: [1, 1],
  ket: [1, 2],
  coherent: [1, 1],
  cat: [1, 2],
};

/** The constants that an answer may name. */
export const constants: ReadonlySet<string> = new Set(['pi', 'e', 'i']);

const longestName = 60;

/** Whether a name, as typed, has a meaning under the grammar. */
export function isKnown(grammar: Grammar, name: string): boolean {
  if (name.length > longestName) return false;
  const canonical = canonicalName(name);
  if (grammar.variables.has(canonical) || constants.has(canonical) || answerFunctions.has(canonical)) return true;
  if (grammar.kets && Object.hasOwn(namedStates, canonical)) return true;
  return grammar.units && unitByName(name) !== undefined;
}
