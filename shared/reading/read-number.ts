import { divide, isFiniteComplex, multiply, real, type Complex } from './complex';
import { contains, type Expression } from './expression';
import { dropLeadingName } from './dropped-name';
import type { Grammar } from './grammar';
import { parseExpression } from './parser';
import { negligible, printComplex, printNumber, printTyped } from './print';
import { ReadingProblem } from './problem';
import { evaluateNumber } from './quantity';
import type { AnswerField, Reading } from './reading';
import { valueWithUnit, type ValueWithUnit } from './unit-part';

/** Numbers with units, decimal point or comma, no variables. */
export const numberGrammar: Grammar = { comma: 'decimal', units: true, kets: false, variables: new Map() };

/** Whether anything in the expression is a number: a unit alone is no answer. */
const hasNumber = (node: Expression): boolean => contains(node, 'number', 'constant');

/** The number in front of the unit. */
function numericValue({ numeric, unit, si }: ValueWithUnit): Complex {
  if (numeric.length === 0) return unit && unit.text !== '°C' ? divide(si, real(unit.factor)) : si;
  return numeric.reduce<Complex>((product, { node, exponent }) => {
    const value = evaluateNumber(node);
    return exponent === 1 ? multiply(product, value) : divide(product, value);
  }, real(1));
}

/** The digits of a plain number as they were typed, or undefined where the number is worked out. */
function typedDigits(node: Expression, negative = false): string | undefined {
  if (node.type === 'negative') return typedDigits(node.argument, !negative);
  const sign = negative ? '−' : '';
  if (node.type === 'number') return sign + printTyped(node.digits, node.exponent);
  if (node.type !== 'binary' || node.operator !== '*' || node.left.type !== 'number') return undefined;
  const { left, right } = node;
  const isTen =
    right.type === 'binary' && right.operator === '^' && right.left.type === 'number' && right.left.value === 10;
  if (!isTen || left.exponent !== undefined) return undefined;
  const power = evaluateNumber(right.right);
  return power.im === 0 && Number.isInteger(power.re) ? sign + printTyped(left.digits, power.re) : undefined;
}

/** A value and its unit with what the read-back prints of them. */
export interface ReadValue extends Omit<ValueWithUnit, 'numeric'> {
  readonly value: Complex;
  readonly readAs: string;
}

/** Works out an expression, refusing what is not finite or has no number in it. */
export function readValue(node: Expression): ReadValue {
  if (!hasNumber(node)) throw new ReadingProblem('There is a unit but no number before it.', node.at);
  const parts = valueWithUnit(node);
  const value = numericValue(parts);
  if (!isFiniteComplex(value) || !isFiniteComplex(parts.si))
    throw new ReadingProblem('The answer is not finite.', node.at);
  const only = parts.numeric.length === 1 ? parts.numeric[0] : undefined;
  const typed = only?.exponent === 1 ? typedDigits(only.node) : undefined;
  const printed = typed ?? printComplex(value);
  const bracketed = parts.unit && typed === undefined && value.im !== 0 && value.re !== 0 ? `(${printed})` : printed;
  return {
    value,
    unit: parts.unit,
    si: parts.si,
    readAs: parts.unit ? `${bracketed}${parts.unit.text === '°' ? '' : ' '}${parts.unit.text}` : printed,
  };
}

/** Reads a real number, with or without a unit. */
export function readNumber(text: string, field: Extract<AnswerField, { form: 'number' }>): Reading {
  const undressed = dropLeadingName(text, numberGrammar);
  const node = parseExpression(undressed.text, numberGrammar);
  const { value, unit, si, readAs } = readValue(node);
  if (value.im !== 0 && !negligible(value.im, value.re)) {
    throw new ReadingProblem(`This is the complex number ${readAs}; a real number is asked for.`, node.at);
  }
  const percent = node.type === 'percent' ? { note: `${printNumber(value.re * 100)} percent` } : {};
  const missing = field.hint === 'with a unit' && !unit ? { note: askForUnit(field.unit) } : percent;
  return {
    kind: 'number',
    value: value.re,
    si: si.re,
    readAs,
    ...(unit ? { unit } : {}),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
    ...missing,
  };
}

const askForUnit = (unit: string | undefined): string =>
  unit === undefined ? 'Which unit?' : `Which unit? Taken in ${unit}.`;

/** Reads a complex number. */
export function readComplex(text: string): Reading {
  const undressed = dropLeadingName(text, numberGrammar);
  const { value, unit, readAs } = readValue(parseExpression(undressed.text, numberGrammar));
  return {
    kind: 'complex',
    value: negligible(value.im, value.re) ? real(value.re) : value,
    readAs,
    ...(unit ? { unit } : {}),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
  };
}
