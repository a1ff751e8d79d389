import { addStates, divideState, multiplyState, subtractStates } from '../optics/superpositions';
import { isState } from '../optics/state';
import { mathematics as m } from './mathematics';
import { plainFunctions, Refusal } from './plain-functions';
import { isComplex, isUnit, kindOf, type Value } from './value';

type Operator = (left: Value, right: Value) => Value;
type UnaryOperator = (operand: Value) => Value;

const from = (f: unknown): Operator => f as Operator;

function factorOf(value: Value): { readonly re: number; readonly im: number } | number {
  if (typeof value === 'number') return value;
  if (isComplex(value)) return { re: value.re, im: value.im };
  throw new Refusal(`a state can be multiplied by numbers only, not by ${kindOf(value)}`);
}

/** The binary operators, by the parser's names. Those on states make superpositions. */
export const binaryOperators: Readonly<Record<string, Operator>> = {
  add: (left, right) => {
    if (typeof left === 'number' && typeof right === 'number') return left + right;
    if (isState(left) && isState(right)) return addStates(left, right);
    return refuseStates(from(m.add), '+', left, right);
  },
  subtract: (left, right) => {
    if (typeof left === 'number' && typeof right === 'number') return left - right;
    if (isState(left) && isState(right)) return subtractStates(left, right);
    return refuseStates(from(m.subtract), '-', left, right);
  },
  multiply: (left, right) => {
    if (typeof left === 'number' && typeof right === 'number') return left * right;
    if (isState(left) && isState(right))
      throw new Refusal('two states are put side by side with `product`, not multiplied');
    if (isState(left)) return multiplyState(factorOf(right), left);
    if (isState(right)) return multiplyState(factorOf(left), right);
    return from(m.multiply)(left, right);
  },
  divide: (left, right) => {
    if (typeof left === 'number' && typeof right === 'number') return left / right;
    if (isState(left)) return divideState(left, factorOf(right));
    return refuseStates(from(m.divide), '/', left, right);
  },
  pow: (left, right) => refuseStates(from(m.pow), '^', left, right),
  mod: (left, right) => refuseStates(from(m.mod), 'mod', left, right),
  dotMultiply: (left, right) => refuseStates(from(m.dotMultiply), '.*', left, right),
  dotDivide: (left, right) => refuseStates(from(m.dotDivide), './', left, right),
  dotPow: (left, right) => refuseStates(from(m.dotPow), '.^', left, right),
  smaller: (left, right) => refuseStates(from(m.smaller), '<', left, right),
  smallerEq: (left, right) => refuseStates(from(m.smallerEq), '<=', left, right),
  larger: (left, right) => refuseStates(from(m.larger), '>', left, right),
  largerEq: (left, right) => refuseStates(from(m.largerEq), '>=', left, right),
  equal: (left, right) => refuseStates(from(m.equal), '==', left, right),
  unequal: (left, right) => refuseStates(from(m.unequal), '!=', left, right),
  to: (left, right) => {
    // Values are given in SI whatever they are converted to; what is left to do is to compare dimensions.
    if (!isUnit(left) || !isUnit(right))
      throw new Refusal('`to` stands between a quantity and a unit, such as 3 MHz to Hz');
    if (!left.equalBase(right)) throw new Refusal('`to`: the units of both sides do not match');
    return left;
  },
  and: (left, right) => truth(left, 'and') && truth(right, 'and'),
  or: (left, right) => truth(left, 'or') || truth(right, 'or'),
};

/** The operators of one operand, by the parser's names. */
export const unaryOperators: Readonly<Record<string, UnaryOperator>> = {
  unaryMinus: (operand) => {
    if (typeof operand === 'number') return -operand;
    return isState(operand) ? multiplyState(-1, operand) : (m.unaryMinus as unknown as UnaryOperator)(operand);
  },
  unaryPlus: (operand) => operand,
  factorial: (operand) => {
    const factorial = plainFunctions['factorial'];
    if (!factorial || isState(operand)) throw new Refusal('`!` takes a whole number');
    return factorial(operand);
  },
  not: (operand) => !truth(operand, 'not'),
};

const needsSameUnits: ReadonlySet<string> = new Set(['+', '-', '<', '<=', '>', '>=', '==', '!=']);

function refuseStates(act: Operator, sign: string, left: Value, right: Value): Value {
  if (isState(left) || isState(right))
    throw new Refusal(`\`${sign}\` is not defined between ${kindOf(left)} and ${kindOf(right)}`);
  if (isUnit(left) !== isUnit(right) && needsSameUnits.has(sign))
    throw new Refusal(`\`${sign}\` needs the same units on both sides, got ${kindOf(left)} and ${kindOf(right)}`);
  return act(left, right);
}

/** A condition: a truth value, or what a comparison gave. */
export function truth(value: Value, where: string): boolean {
  if (typeof value === 'boolean') return value;
  throw new Refusal(`\`${where}\` needs a comparison, such as n > 2, not ${kindOf(value)}`);
}
