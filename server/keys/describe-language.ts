import { defaultConvention } from '../optics/convention';
import { stateFunctions } from '../optics/states';
import { argumentDomain } from './argument-domains';
import { keyExamples } from './key-examples';
import type { KeyRequest } from './key-task';
import { plainFunctions } from './plain-functions';
import { keySignatures } from './signatures';

/** An argument as the description names it. */
export interface DescribedArgument {
  readonly name: string;
  readonly otherwise?: string;
  readonly domain: string;
  /** A value that is refused. */
  readonly outside?: string;
}

/** A function as the description has it, with its example still to be run. */
export interface DescribedFunction {
  readonly name: string;
  readonly signature: string;
  readonly summary: string;
  readonly formula: string;
  readonly group: string;
  readonly makes: 'state' | 'figure' | 'arithmetic';
  readonly arguments: readonly DescribedArgument[];
  readonly example: string | null;
}

/** The headings of the language, each with the function that it begins with; they follow the order of the signatures. */
const beginnings: Readonly<Record<string, string>> = {
  vacuum: 'States of one mode',
  product: 'States of two modes',
  beamSplitter: 'Operations',
  bathAmplitude: 'Coupled oscillators',
  photonProbability: 'Figures of one mode',
  jointProbability: 'Figures of two modes',
  thermalOccupation: 'With units',
  laguerre: 'Special functions',
  abs: 'Arithmetic',
  exp: 'Exponentials and logarithms',
  sin: 'Angles',
  sinh: 'Hyperbolic functions',
  sum: 'Lists and whole numbers',
};

/** Describes every function of the language from its registration, in the order of the page. */
export function describeFunctions(): readonly DescribedFunction[] {
  let group = '';
  return keySignatures.map(({ name, signature, summary, formula }) => {
    group = (Object.hasOwn(beginnings, name) ? beginnings[name] : undefined) ?? group;
    const isArithmetic = Object.hasOwn(plainFunctions, name);
    return {
      name,
      signature,
      summary,
      formula,
      group,
      makes: isArithmetic ? 'arithmetic' : Object.hasOwn(stateFunctions, name) ? 'state' : 'figure',
      arguments: argumentsOf(signature).map(({ name: argument, otherwise }) => {
        const domain = argumentDomain(name, argument, isArithmetic);
        return {
          name: argument,
          ...(otherwise === undefined ? {} : { otherwise }),
          domain: domain?.words ?? '',
          ...(domain?.outside === undefined ? {} : { outside: domain.outside }),
        };
      }),
      example: Object.hasOwn(keyExamples, name) ? (keyExamples[name] ?? null) : null,
    };
  });
}

/** The arguments of a signature with what they are where they are left out. */
function argumentsOf(signature: string): readonly { readonly name: string; readonly otherwise?: string }[] {
  const inside = /\((.*)\)/.exec(signature)?.[1]?.trim() ?? '';
  if (inside === '') return [];
  return inside.split(',').map((each) => {
    const [name = '', otherwise] = each.split('=').map((part) => part.trim());
    return { name, ...(otherwise === undefined ? {} : { otherwise }) };
  });
}

/** How an example is run: one that comes to a state as a state. */
export function requestOfExample(expression: string): KeyRequest {
  const called = /^\(?\s*([A-Za-z]\w*)/.exec(expression)?.[1] ?? '';
  const isState = Object.hasOwn(stateFunctions, called);
  const seed = 'example';
  return {
    expression,
    givens: {},
    convention: defaultConvention,
    seed,
    ...(isState ? { wanted: { kind: 'state' } } : {}),
  };
}
