import type { NamedUnit } from './units';

/** A constant that an answer may name. */
export type ConstantName = 'pi' | 'e' | 'i';

export type BinaryOperator = '+' | '-' | '*' | '/' | '^';

/** An answer as understood: the tree that is evaluated, compared and typeset. */
export type Expression =
  | {
      readonly type: 'number';
      readonly value: number;
      readonly digits: string;
      readonly exponent?: number;
      readonly at: number;
    }
  | { readonly type: 'constant'; readonly name: ConstantName; readonly at: number }
  | { readonly type: 'variable'; readonly name: string; readonly at: number }
  | { readonly type: 'unit'; readonly unit: NamedUnit; readonly at: number }
  | { readonly type: 'call'; readonly name: string; readonly argument: Expression; readonly at: number }
  | { readonly type: 'negative'; readonly argument: Expression; readonly at: number }
  | { readonly type: 'percent'; readonly argument: Expression; readonly at: number }
  | { readonly type: 'factorial'; readonly argument: Expression; readonly at: number }
  | { readonly type: 'ket'; readonly photons: readonly number[]; readonly at: number }
  | { readonly type: 'state'; readonly name: string; readonly arguments: readonly Expression[]; readonly at: number }
  | {
      readonly type: 'binary';
      readonly operator: BinaryOperator;
      readonly implicit: boolean;
      readonly left: Expression;
      readonly right: Expression;
      readonly at: number;
    };

export type BinaryExpression = Extract<Expression, { type: 'binary' }>;

/** The direct parts of an expression. */
export function childrenOf(node: Expression): readonly Expression[] {
  switch (node.type) {
    case 'call':
    case 'negative':
    case 'percent':
    case 'factorial':
      return [node.argument];
    case 'binary':
      return [node.left, node.right];
    case 'state':
      return node.arguments;
    default:
      return [];
  }
}

/** Whether the expression or any part of it is of one of the types. */
export function contains(node: Expression, ...types: readonly Expression['type'][]): boolean {
  return types.includes(node.type) || childrenOf(node).some((child) => contains(child, ...types));
}

/** A binary node. */
export function binary(
  operator: BinaryOperator,
  left: Expression,
  right: Expression,
  implicit = false,
): BinaryExpression {
  return { type: 'binary', operator, implicit, left, right, at: left.at };
}
