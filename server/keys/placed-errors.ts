import type { MathNode } from 'mathjs';
import { OpticsError } from '../optics/optics-error';
import { KeyError } from './key-error';
import { mathematics } from './mathematics';
import { Refusal } from './plain-functions';
import type { Place, SourceText } from './source-text';
import { kindOf, type Value } from './value';

/** Parses an expression. @throws KeyError with the place that the parser names */
export function parse(expression: string, source: SourceText): MathNode {
  try {
    return mathematics.parse(expression);
  } catch (error) {
    // The parser says "… (char 7)", counted from 1; too deep an expression overflows its stack.
    if (error instanceof RangeError) throw new KeyError('The expression is nested too deeply.', null);
    const message = error instanceof Error ? error.message : String(error);
    const at = /\s*\(char (\d+)\)\s*$/.exec(message);
    const position = at ? Math.min(Number(at[1]) - 1, Math.max(0, expression.length - 1)) : 0;
    const sentence = message.slice(0, at?.index ?? message.length).replace(/\.?$/, '.');
    throw new KeyError(sentence, at ? { position, length: 1 } : source.whole);
  }
}

/** Does something and turns what it throws into an error with a place. */
export function guarded<Result>(
  place: Place,
  name: string | undefined,
  act: () => Result,
  argumentsOf?: readonly Place[],
  values: readonly Value[] = [],
): Result {
  try {
    return act();
  } catch (error) {
    if (error instanceof KeyError) throw error;
    if (error instanceof OpticsError) {
      const own =
        error.argumentIndex === undefined || error.functionName !== name
          ? undefined
          : argumentsOf?.[error.argumentIndex];
      throw new KeyError(error.message, own ?? place, { functionName: error.functionName, argument: error.argument });
    }
    if (error instanceof Refusal)
      throw new KeyError(name ? `\`${name}\`: ${error.message}` : error.message, place, { functionName: name });
    if (error instanceof RangeError) throw new KeyError('The expression needs more room than there is.', place);
    const index = objectedArgument(error);
    const own = index === undefined ? undefined : argumentsOf?.[index];
    throw new KeyError(libraryMessage(error, name, values), own ?? place, { functionName: name });
  }
}

const listFunctions: ReadonlySet<string> = new Set(['sum', 'prod', 'min', 'max', 'mean']);

/** Which argument the mathematics library objects to, from 0. */
function objectedArgument(error: unknown): number | undefined {
  if (!(error instanceof Error) || !('data' in error)) return undefined;
  const { data } = error;
  if (typeof data !== 'object' || data === null || !('index' in data)) return undefined;
  return typeof data.index === 'number' ? data.index : undefined;
}

/** What the mathematics library objects to, in our words. */
function libraryMessage(error: unknown, name: string | undefined, values: readonly Value[]): string {
  const message = error instanceof Error ? error.message : String(error);
  const subject = name ? `\`${name}\`: ` : '';
  const index = objectedArgument(error);
  if (index !== undefined && name !== undefined) {
    if (message.startsWith('Too few')) return `${subject}needs more arguments, got ${String(values.length)}`;
    if (message.startsWith('Too many')) return `${subject}takes fewer arguments, got ${String(values.length)}`;
    const which = values.length > 1 ? `argument ${String(index + 1)}` : 'its argument';
    return `${subject}${which} must be ${listFunctions.has(name) ? 'numbers or a list of numbers' : 'a number'}, got ${kindOf(values[index])}`;
  }
  if (message.startsWith('Units do not match')) return `${subject}the units of both sides do not match`;
  if (message.startsWith('Too few arguments')) return `${subject}needs more arguments`;
  if (message.startsWith('Too many arguments')) return `${subject}takes fewer arguments`;
  if (message.startsWith('Unexpected type of argument')) return `${subject}cannot take this kind of value`;
  if (message.startsWith('Dimension mismatch')) return `${subject}the lists are of different lengths`;
  return `${subject}${message}`;
}
