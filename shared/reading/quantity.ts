import { add, divide, multiply, negate, one, power, real, subtract, type Complex } from './complex';
import { answerFunctions, factorial } from './complex-functions';
import { combine, comparable, isPure, pure, type Dimension } from './dimension';
import type { BinaryExpression, Expression } from './expression';
import { ReadingProblem } from './problem';

/** A value in coherent SI units with its dimension. */
export interface Quantity {
  readonly value: Complex;
  readonly dimension: Dimension;
}

/** What a name stands for while a formula is evaluated. */
export type Scope = ReadonlyMap<string, Complex>;

const empty: Scope = new Map();
const constantValues = { pi: real(Math.PI), e: real(Math.E), i: { re: 0, im: 1 } } as const;
const pureQuantity = (value: Complex): Quantity => ({ value, dimension: pure });

/**
 * The value of an expression, units included. Undefined values come out as NaN or infinite: callers look. Throws a
 * ReadingProblem where units do not go together, as in 3 m + 2 s.
 */
export function evaluateQuantity(node: Expression, scope: Scope = empty): Quantity {
  switch (node.type) {
    case 'number':
      return pureQuantity(real(node.value));
    case 'constant':
      return pureQuantity(constantValues[node.name]);
    case 'variable':
      return pureQuantity(scope.get(node.name) ?? real(NaN));
    case 'unit':
      return { value: real(node.unit.factor), dimension: node.unit.dimension };
    case 'negative': {
      const { value, dimension } = evaluateQuantity(node.argument, scope);
      return { value: negate(value), dimension };
    }
    case 'percent': {
      const { value, dimension } = evaluateQuantity(node.argument, scope);
      return { value: divide(value, real(100)), dimension };
    }
    case 'factorial':
      return pureQuantity(factorial(pureArgument(node.argument, scope)));
    case 'call':
      return call(node, scope);
    case 'binary':
      return operate(node, scope);
    default:
      throw new ReadingProblem('A state has no place in a number.', node.at);
  }
}

/** The value of an expression without units. */
export function evaluateNumber(node: Expression, scope: Scope = empty): Complex {
  return evaluateQuantity(node, scope).value;
}

/** An argument that must be a pure number; an angle counts as one, in radians. */
function pureArgument(node: Expression, scope: Scope): Complex {
  const { value, dimension } = evaluateQuantity(node, scope);
  if (!isPure({ ...dimension, rad: 0 })) throw new ReadingProblem('A function takes a number without a unit.', node.at);
  return value;
}

function call(node: Extract<Expression, { type: 'call' }>, scope: Scope): Quantity {
  if (node.name === 'sqrt' || node.name === 'abs') {
    const { value, dimension } = evaluateQuantity(node.argument, scope);
    const result = answerFunctions.get(node.name)?.(value) ?? real(NaN);
    return { value: result, dimension: node.name === 'sqrt' ? combine(pure, dimension, 0.5) : dimension };
  }
  const apply = answerFunctions.get(node.name);
  return pureQuantity(apply ? apply(pureArgument(node.argument, scope)) : real(NaN));
}

function operate(node: BinaryExpression, scope: Scope): Quantity {
  const left = evaluateQuantity(node.left, scope);
  const right = evaluateQuantity(node.right, scope);
  switch (node.operator) {
    case '+':
    case '-': {
      const both = isPure(left.dimension) === isPure(right.dimension) && comparable(left.dimension, right.dimension);
      if (!both) throw new ReadingProblem('These units cannot be added to each other.', node.right.at);
      const value = node.operator === '+' ? add(left.value, right.value) : subtract(left.value, right.value);
      return { value, dimension: left.dimension };
    }
    case '*':
      return { value: multiply(left.value, right.value), dimension: combine(left.dimension, right.dimension) };
    case '/':
      return { value: divide(left.value, right.value), dimension: combine(left.dimension, right.dimension, -1) };
    case '^':
      return raise(node, left, right);
  }
}

function raise(node: BinaryExpression, base: Quantity, exponent: Quantity): Quantity {
  if (!isPure(exponent.dimension)) throw new ReadingProblem('A power takes a number without a unit.', node.right.at);
  const isNatural = node.left.type === 'constant' && node.left.name === 'e';
  const value = isNatural ? (answerFunctions.get('exp')?.(exponent.value) ?? one) : power(base.value, exponent.value);
  if (isPure(base.dimension)) return pureQuantity(value);
  if (exponent.value.im !== 0 || !Number.isFinite(exponent.value.re) || Math.abs(exponent.value.re) > 99) {
    throw new ReadingProblem('A unit takes a real power.', node.right.at);
  }
  const twelfths = 12 * exponent.value.re;
  if (Math.abs(twelfths - Math.round(twelfths)) > 1e-9)
    throw new ReadingProblem('A unit takes a whole power, or a simple fraction.', node.right.at);
  return { value, dimension: combine(pure, base.dimension, exponent.value.re) };
}
