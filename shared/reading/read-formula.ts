import { isFiniteComplex } from './complex';
import { dropLeadingName } from './dropped-name';
import { contains } from './expression';
import { canonicalName } from './names';
import type { Grammar } from './grammar';
import { parseExpression } from './parser';
import { ReadingProblem } from './problem';
import { evaluateNumber } from './quantity';
import type { FieldVariable, Reading } from './reading';
import { printExpression, typeset } from './typeset';

/** The grammar of a formula: its variables under all their spellings win over functions and constants. */
export function formulaGrammar(variables: readonly FieldVariable[]): Grammar {
  const spellings = new Map<string, string>();
  for (const { name, spellings: others = [] } of variables) {
    for (const spelling of others) {
      const canonical = canonicalName(spelling);
      if (canonical !== '' && !spellings.has(canonical)) spellings.set(canonical, name);
    }
  }
  // A variable's own name wins over another's spelling.
  for (const { name } of variables) spellings.set(canonicalName(name), name);
  for (const constant of ['e', 'i', 'pi']) spellings.delete(constant);
  return { comma: 'decimal', units: false, kets: false, variables: spellings };
}

/** Reads a formula in the variables of its field. */
export function readFormula(text: string, variables: readonly FieldVariable[]): Reading {
  const grammar = formulaGrammar(variables);
  const undressed = dropLeadingName(text, grammar);
  const expression = parseExpression(undressed.text, grammar);
  if (!contains(expression, 'variable') && !isFiniteComplex(evaluateNumber(expression))) {
    throw new ReadingProblem('The answer is not finite.', expression.at);
  }
  const symbols = new Map(
    variables.flatMap(({ name, symbol }) => (symbol === undefined ? [] : [[name, symbol] as const])),
  );
  return {
    kind: 'formula',
    expression,
    readAs: printExpression(expression),
    typeset: typeset(expression, symbols),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
  };
}
