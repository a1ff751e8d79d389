import * as z from 'zod';
import { plainValue } from './checks';
import { defineRoute } from './route';

/** An argument of a function of the key language. */
const keyArgument = z.object({
  name: z.string(),
  /** What it is where it is left out; absent where it cannot be. */
  otherwise: z.string().optional(),
  /** What it may be, in words. */
  domain: z.string(),
});

/** A function of the key language, as completion, help with arguments and its page describe it. */
const keyFunction = z.object({
  name: z.string(),
  /** For example `photonProbability(state, n)`. */
  signature: z.string(),
  /** One line. */
  summary: z.string(),
  /** KaTeX; empty where a word says it better. */
  formula: z.string(),
  /** The heading under which it stands. */
  group: z.string(),
  /** Whether it makes a state, asks something of one, or does neither. */
  makes: z.enum(['state', 'figure', 'arithmetic']),
  arguments: z.array(keyArgument).readonly(),
  /** An expression that was run, with what it came to; null where examples are left out. */
  example: z
    .object({
      expression: z.string(),
      value: plainValue,
      unit: z.string().optional(),
      typeset: z.string().optional(),
      method: z.string(),
      agreesTo: z.number().optional(),
    })
    .nullable(),
});
export type KeyFunction = z.infer<typeof keyFunction>;

/** A physical constant. */
const keyConstant = z.object({ name: z.string(), value: z.number(), unit: z.string() });

/** All names that key expressions may use. */
const keyLanguage = z.object({
  /** In the order of the page. */
  functions: z.array(keyFunction).readonly(),
  constants: z.array(keyConstant).readonly(),
});
export type KeyLanguage = z.infer<typeof keyLanguage>;

/** The key language, described from its own registrations. */
export const keyLanguageRoute = defineRoute({
  method: 'GET',
  path: '/key-language',
  summary: 'The functions and constants of key expressions, with formulas, domains and examples that were run',
  query: z.object({
    /** Editors need no examples, which take the workers a moment when they are run for the first time. */
    examples: z.enum(['run', 'left out']).default('run'),
  }),
  response: keyLanguage,
});
