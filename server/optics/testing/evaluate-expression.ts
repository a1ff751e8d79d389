import * as mathjs from 'mathjs';
import type { MathNode } from 'mathjs';
import { bathAmplitude, invertedBathAmplitude } from '../bath-amplitude';
import { compareMethods } from '../compare-methods';
import type { Complex } from '../complex';
import { defaultConvention, type Convention } from '../convention';
import { figureByMethods } from '../figure-by-methods';
import { figureFunctions, type FigureValue } from '../figures';
import type { ComparedValue } from '../methods';
import { isState, type State } from '../state';
import { stateFunctions, type StateFunction } from '../states';
import { addStates, divideState, multiplyState, subtractStates } from '../superpositions';
import type { FigureFunction } from '../figures';

const math = mathjs;

/** A value that an expression of the specs evaluates to. */
export type SpecValue = FigureValue | State | readonly SpecValue[];

/** Every figure that an expression asked for, for tests that look at the methods. */
export interface SpecEvaluation {
  readonly value: SpecValue;
  readonly figures: readonly ComparedValue[];
}

const constants: Readonly<Record<string, SpecValue>> = { pi: Math.PI, e: Math.E, i: { re: 0, im: 1 } };

/**
 * Evaluates an expression of the key language without units, for specs: a walk over the library's syntax tree with
 * the functions of this folder. The language proper is another folder's.
 */
export function evaluateExpression(
  expression: string,
  givens: Readonly<Record<string, SpecValue>> = {},
  convention: Partial<Convention> = {},
): SpecEvaluation {
  const figures: ComparedValue[] = [];
  const course = { ...defaultConvention, ...convention };
  const value = evaluate(math.parse(expression), { ...constants, ...givens }, course, figures);
  return { value, figures };
}

function evaluate(
  node: MathNode,
  scope: Readonly<Record<string, SpecValue>>,
  convention: Convention,
  figures: ComparedValue[],
): SpecValue {
  const go = (inner: MathNode) => evaluate(inner, scope, convention, figures);
  if (math.isConstantNode(node)) return node.value;
  if (math.isParenthesisNode(node)) return go(node.content);
  if (math.isArrayNode(node)) return node.items.map(go);
  if (math.isSymbolNode(node)) {
    const found = scope[node.name];
    if (found === undefined) throw new Error(`unknown name ${node.name}`);
    return found;
  }
  if (math.isOperatorNode(node)) return operate(node.fn, node.args.map(go));
  if (math.isFunctionNode(node)) {
    const name = node.fn.name;
    const args = node.args.map(go);
    if (name in stateFunctions) {
      return (stateFunctions as Readonly<Record<string, StateFunction>>)[name]!(args, convention);
    }
    if (name in figureFunctions) {
      const figure = (figureFunctions as Readonly<Record<string, FigureFunction>>)[name]!(args, convention);
      const compared = compareMethods(name, figureByMethods(figure));
      figures.push(compared);
      return compared.value;
    }
    if (name === 'bathAmplitude' || name === 'invertedBathAmplitude') {
      const find = name === 'bathAmplitude' ? bathAmplitude : invertedBathAmplitude;
      const [t, omega, frequencies, couplings] = args;
      return find(Number(t), Number(omega), frequencies as number[], couplings as number[]).amplitude;
    }
    return back((math as unknown as Record<string, (...values: unknown[]) => unknown>)[name]!(...args.map(forth)));
  }
  throw new Error(`not an expression of the specs: ${node.toString()}`);
}

const forth = (value: SpecValue): unknown =>
  typeof value === 'object' && 're' in value ? math.complex(value.re, value.im) : value;

function back(value: unknown): SpecValue {
  if (typeof value === 'number') return value;
  if (math.isComplex(value)) return { re: value.re, im: value.im } satisfies Complex;
  throw new Error('not a number');
}

function operate(name: string, args: readonly SpecValue[]): SpecValue {
  const [left, right] = args;
  if (left !== undefined && right !== undefined) {
    if (isState(left) && isState(right)) return name === 'add' ? addStates(left, right) : subtractStates(left, right);
    if (isState(left)) {
      return name === 'divide' ? divideState(left, right as number) : multiplyState(right as number, left);
    }
    if (isState(right)) return multiplyState(left as number, right);
  }
  if (left !== undefined && isState(left)) return multiplyState(-1, left);
  return back((math as unknown as Record<string, (...values: unknown[]) => unknown>)[name]!(...args.map(forth)));
}
