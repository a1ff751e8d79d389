import type * as z from 'zod';
import type { keyLanguageRoute } from '@shared/key-language';
import { describeFunctions, requestOfExample } from '../keys/describe-language';
import { physicalConstants } from '../keys/physical-constants';
import type { KeyOutcome } from '../keys';
import { evaluateOutcomes, type Keys } from '../variants/evaluate-outcomes';
import { presentKey } from '../variants/key-outcome';

type Language = z.input<(typeof keyLanguageRoute)['response']>;

/** Examples that are run at once: keys that somebody waits for come between. */
const atOnce = 8;

/** The description of the key language. */
export interface DescribedLanguage {
  /** What can be said without running anything. */
  readonly plain: Language;
  /** The same with its examples, which are run once for as long as the server runs. */
  withExamples(): Promise<Language>;
}

/** Describes the language; its examples are run in the pool when they are first asked for. */
export function createKeyLanguage(keys: Keys): DescribedLanguage {
  const described = describeFunctions();
  const constants = Object.entries(physicalConstants).map(([name, { value, unit }]) => ({ name, value, unit }));
  const functions = described.map(({ example: _, arguments: all, ...each }) => ({
    ...each,
    arguments: all.map(({ outside: __, ...argument }) => argument),
    example: null,
  }));
  const plain: Language = { functions, constants };
  let made: Promise<Language> | undefined;

  async function run(): Promise<Language> {
    const written = described.map(({ example }) => example);
    const expressions = written.filter((example) => example !== null);
    const outcomes: KeyOutcome[] = [];
    for (let at = 0; at < expressions.length; at += atOnce)
      outcomes.push(...(await evaluateOutcomes(keys, expressions.slice(at, at + atOnce).map(requestOfExample))));
    return {
      functions: functions.map((each, index) => {
        const example = written[index] ?? null;
        return example === null
          ? each
          : { ...each, example: exampleOf(example, outcomes[expressions.indexOf(example)]) };
      }),
      constants,
    };
  }

  return {
    plain,
    withExamples: () => {
      made ??= run().catch((error: unknown) => {
        // Whatever stopped the workers, the next one who asks tries again.
        made = undefined;
        throw error;
      });
      return made;
    },
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
