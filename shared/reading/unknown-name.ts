import { constants, type Grammar } from './grammar';
import type { Token } from './lexer';
import { canonicalName } from './names';
import { quote, ReadingProblem } from './problem';
import { nearestUnit } from './units';

/** Known variables that the letters of a name are made of: `kappat` may mean kappa t. */
function splitIntoNames(text: string, grammar: Grammar): readonly string[] | undefined {
  const names = [...grammar.variables.keys(), ...constants];
  const split = (rest: string, most: number): readonly string[] | undefined => {
    if (rest === '') return [];
    if (most === 0) return undefined;
    for (const name of names) {
      const tail = rest.startsWith(name) ? split(rest.slice(name.length), most - 1) : undefined;
      if (tail) return [name, ...tail];
    }
    return undefined;
  };
  const found = grammar.variables.size > 0 ? split(canonicalName(text).slice(0, 40), 4) : undefined;
  return found && found.length > 1 ? found : undefined;
}

/** Why a name cannot be read, with what may have been meant. */
export function unknownName(token: Token, grammar: Grammar): ReadingProblem {
  const typed = quote(token.text);
  if (token.text === '∞' || /^inf(inity)?$/i.test(canonicalName(token.text))) {
    return new ReadingProblem('The answer is not finite.', token.start);
  }
  if (token.text === 'j') {
    return new ReadingProblem('“j” is not known here; write i for the imaginary unit.', token.start);
  }
  const near = grammar.units ? nearestUnit(token.text) : undefined;
  if (near !== undefined) {
    return new ReadingProblem(`The unit ${typed} is not known; did you mean ${quote(near)}?`, token.start);
  }
  const apart = splitIntoNames(token.text, grammar);
  if (apart) {
    const product = quote(apart.join(' '));
    return new ReadingProblem(`The name ${typed} is not known here; for a product write ${product}.`, token.start);
  }
  const what = grammar.units ? 'is neither a unit nor a name that is known here' : 'is not a name that is known here';
  return new ReadingProblem(`${typed} ${what}.`, token.start);
}
