import type * as z from 'zod';
import type { keyLanguageRoute } from '@shared/key-language';
import { describeFunctions, requestOfExample } from '../keys/describe-language';
import { physicalConstants } from '../keys/physical-constants';
import type { KeyOutcome } from '../keys';
import { evaluateOutcomes, type Keys } from '../variants/evaluate-outcomes';
import { presentKey } from '../variants/key-outcome';

type Language = z.input<(typeof keyLanguageRoute)['response']>;

/**
 * The description of the key language with its examples run, once for as long as the server runs.
 *
 * @returns a function that answers with the same description every time
 */
export function createKeyLanguage(keys: Keys): () => Promise<Language> {
  let made: Promise<Language> | undefined;
  return () => {
    made ??= describe(keys).catch((error: unknown) => {
      // Whatever stopped the workers, the next one who asks tries again.
      made = undefined;
      throw error;
    });
    return made;
  };
}

async function describe(keys: Keys): Promise<Language> {
  const functions = describeFunctions();
  const examples = functions.map(({ example }) => example);
  const run = examples.filter((example) => example !== null);
  const outcomes = await evaluateOutcomes(keys, run.map(requestOfExample));
  return {
    functions: functions.map(({ example, arguments: all, ...each }) => ({
      ...each,
      arguments: all.map(({ name, otherwise, domain }) => ({
        name,
        ...(otherwise === undefined ? {} : { otherwise }),
        domain,
      })),
      example: example === null ? null : exampleOf(example, outcomes[run.indexOf(example)]),
    })),
    constants: Object.entries(physicalConstants).map(([name, { value, unit }]) => ({ name, value, unit })),
  };
}

function exampleOf(expression: string, outcome: KeyOutcome | undefined): Language['functions'][number]['example'] {
  if (!outcome?.key) return null;
  const { value, unit, method, agreesTo } = presentKey(outcome.key);
  const typeset = 'typeset' in outcome.key ? outcome.key.typeset : undefined;
  return {
    expression,
    value,
    method,
    ...(unit === undefined ? {} : { unit }),
    ...(typeset === undefined ? {} : { typeset }),
    ...(agreesTo === undefined ? {} : { agreesTo }),
  };
}
