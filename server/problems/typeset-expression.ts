import type { MathNode } from 'mathjs';
import type { GivenValues } from '@shared/variants';
import { mathematics } from '../keys/mathematics';
import { plainFunctions } from '../keys/plain-functions';

/** What names in an expression are printed as. */
export interface Naming {
  /** Givens, printed as their values where they are no variable. */
  readonly values: GivenValues;
  /** KaTeX of givens and variables, by name. */
  readonly symbols: ReadonlyMap<string, string>;
  readonly variables: ReadonlySet<string>;
}

const greek = new Set(
  'alpha beta gamma delta epsilon zeta eta theta iota kappa lambda mu nu xi rho sigma tau phi chi psi omega'.split(' '),
);

/** A node as far as it is looked at. */
type Looked = MathNode & {
  readonly name?: string;
  readonly fn?: { readonly name?: string };
  readonly args?: readonly MathNode[];
};

/**
 * A key expression in KaTeX, with the values of a variant in the place of its givens.
 *
 * @returns an empty text where the expression cannot be parsed, of which its fault speaks
 */
export function typesetExpression(expression: string, naming: Naming): string {
  try {
    return mathematics
      .parse(expression)
      .toTex({
        parenthesis: 'auto',
        handler: (node: Looked, options: object) => setNode(node, options, naming),
      })
      .trim();
  } catch {
    // Whatever cannot be parsed has been said to be so by the evaluation.
    return '';
  }
}

function setNode(node: Looked, options: object, naming: Naming): string | undefined {
  // The library writes `\\cdot` right before what follows, so that a name needs room before it.
  if (node.type === 'SymbolNode') return ` ${setName(node.name ?? '', naming)}`;
  if (node.type !== 'FunctionNode') return undefined;
  const name = node.fn?.name ?? '';
  // The library knows how to set arithmetic; what knows of light is set by name.
  if (Object.hasOwn(plainFunctions, name)) return undefined;
  const args = (node.args ?? []).map((arg) => arg.toTex(options));
  return `\\operatorname{${name}}\\left(${args.join(',\\,')}\\right)`;
}

function setName(name: string, { values, symbols, variables }: Naming): string {
  const value = variables.has(name) || !Object.hasOwn(values, name) ? undefined : values[name];
  if (value) {
    const unit = value.unit === undefined ? '' : `\\,\\mathrm{${value.unit}}`;
    return `{${value.printed.replace('−', '-')}${unit}}`;
  }
  const symbol = symbols.get(name);
  if (symbol !== undefined) return `{${symbol}}`;
  if (greek.has(name)) return `\\${name}`;
  if (name === 'pi') return '\\pi';
  const [, letters = name, index = ''] = /^([A-Za-z]+)_?(\d*)$/.exec(name) ?? [];
  const base =
    letters.length === 1
      ? letters
      : greek.has(letters)
        ? `\\${letters}`
        : `\\mathrm{${letters.replaceAll('_', '\\_')}}`;
  return index === '' ? base : `${base}_{${index}}`;
}
