import type { Complex } from './complex';
import { contains, type BinaryExpression, type Expression } from './expression';
import { texName } from './names';
import { negligible, printNumber } from './print';

/** How tightly a node holds together, for where brackets are needed. */
const Level = { sum: 1, product: 2, sign: 3, power: 4, atom: 5 } as const;

export function levelOf(node: Expression): number {
  switch (node.type) {
    case 'binary':
      return node.operator === '+' || node.operator === '-'
        ? Level.sum
        : node.operator === '^'
          ? Level.power
          : Level.product;
    case 'negative':
      return Level.sign;
    case 'factorial':
    case 'percent':
      return Level.power;
    default:
      return Level.atom;
  }
}

const upright: Readonly<Record<string, string>> = {
  sqrt: '',
  abs: '',
  asin: 'arcsin',
  acos: 'arccos',
  atan: 'arctan',
  log: 'ln',
  lg: 'lg',
  log10: 'log_{10}',
  log2: 'log_{2}',
  gamma: 'Gamma',
};
const texFunctions = new Set([
  'exp',
  'ln',
  'lg',
  'sin',
  'cos',
  'tan',
  'sec',
  'csc',
  'cot',
  'sinh',
  'cosh',
  'tanh',
  'coth',
  'arcsin',
  'arccos',
  'arctan',
  'arg',
  'log_{10}',
  'log_{2}',
  'Gamma',
]);

function functionName(name: string): string {
  const shown = Object.hasOwn(upright, name) ? (upright[name] ?? name) : name;
  return texFunctions.has(shown) ? `\\${shown}` : `\\operatorname{${shown}}`;
}

/** KaTeX source of a number: `7.65\times 10^{6}`. */
export function texNumber(value: number, figures = 7): string {
  return texDigits(printNumber(value, figures));
}

/** A printed number as KaTeX source. */
function texDigits(printed: string): string {
  return printed
    .replace(/−/g, '-')
    .replace(/\u202f/g, '\\,')
    .replace(/ × 10([⁻⁰¹²³⁴⁵⁶⁷⁸⁹]+)/, (_, power: string) => {
      const plain = [...power].map((sign) => (sign === '⁻' ? '-' : String('⁰¹²³⁴⁵⁶⁷⁸⁹'.indexOf(sign)))).join('');
      return `\\times 10^{${plain}}`;
    });
}

/** KaTeX source of a complex number. */
export function texComplex({ re, im }: Complex, figures = 4): string {
  if (im === 0 || negligible(im, re)) return texNumber(re, figures);
  const size = texNumber(Math.abs(im), figures);
  const imaginary = size === '1' ? 'i' : `${size}\\,i`;
  if (re === 0 || negligible(re, im)) return im < 0 ? `-${imaginary}` : imaginary;
  return `${texNumber(re, figures)} ${im < 0 ? '-' : '+'} ${imaginary}`;
}

/** KaTeX source of an expression, brackets only where they are needed; it shows how the answer was taken. */
export function typeset(node: Expression, symbols: ReadonlyMap<string, string> = new Map()): string {
  const show = (child: Expression) => typeset(child, symbols);
  const within = (child: Expression, level: number) =>
    levelOf(child) < level ? `\\left(${show(child)}\\right)` : show(child);
  switch (node.type) {
    case 'number':
      return node.exponent === undefined ? node.digits : `${node.digits}\\times 10^{${node.exponent}}`;
    case 'constant':
      return node.name === 'pi' ? '\\pi' : node.name;
    case 'variable':
      return `{${symbols.get(node.name) ?? texName(node.name)}}`;
    case 'unit':
      return `\\mathrm{${node.unit.name.replace('µ', '\\mu ').replace('Ω', '\\Omega ').replace('°', '^\\circ ')}}`;
    case 'negative':
      return `-${within(node.argument, Level.sign)}`;
    case 'percent':
      return `${within(node.argument, Level.power)}\\%`;
    case 'factorial':
      return `${within(node.argument, Level.atom)}!`;
    case 'call':
      if (node.name === 'sqrt') return `\\sqrt{${show(node.argument)}}`;
      if (node.name === 'abs') return `\\left|${show(node.argument)}\\right|`;
      return `${functionName(node.name)}\\left(${show(node.argument)}\\right)`;
    case 'ket':
      return `|${node.photons.join(',')}\\rangle`;
    case 'state':
      return `\\operatorname{${node.name}}\\left(${node.arguments.map(show).join(',')}\\right)`;
    case 'binary':
      return typesetOperation(node, show, within);
  }
}

function typesetOperation(
  { operator, left, right }: BinaryExpression,
  show: (child: Expression) => string,
  within: (child: Expression, level: number) => string,
): string {
  switch (operator) {
    case '+':
      return `${show(left)} + ${within(right, Level.sum + 0.5)}`;
    case '-':
      return `${show(left)} - ${within(right, Level.sum + 0.5)}`;
    case '/':
      return `\\frac{${show(left)}}{${show(right)}}`;
    case '^':
      return `{${within(left, Level.atom)}}^{${show(right)}}`;
    case '*': {
      const second = within(right, Level.sign + 0.5);
      // A dot keeps digits apart that would run together: 2·10³.
      return `${within(left, Level.product)}${/^[\d{]*\d/.test(second) ? '\\cdot ' : '\\,'}${second}`;
    }
  }
}

/** An expression in plain text, for places without typesetting: the read-back line and the record. */
export function printExpression(node: Expression): string {
  const within = (child: Expression, level: number) =>
    levelOf(child) < level ? `(${printExpression(child)})` : printExpression(child);
  switch (node.type) {
    case 'number':
      return node.exponent === undefined ? node.digits : `${node.digits}e${node.exponent}`;
    case 'constant':
      return node.name === 'pi' ? 'π' : node.name;
    case 'variable':
      return node.name;
    case 'unit':
      return node.unit.name;
    case 'negative':
      return `−${within(node.argument, Level.sign)}`;
    case 'percent':
      return `${within(node.argument, Level.power)}%`;
    case 'factorial':
      return `${within(node.argument, Level.atom)}!`;
    case 'call':
      return `${node.name}(${printExpression(node.argument)})`;
    case 'ket':
      return `|${node.photons.join(',')}⟩`;
    case 'state':
      return `${node.name}(${node.arguments.map(printExpression).join(', ')})`;
    case 'binary': {
      const { operator, left, right } = node;
      if (operator === '+') return `${printExpression(left)} + ${within(right, Level.sum + 0.5)}`;
      if (operator === '-') return `${printExpression(left)} − ${within(right, Level.sum + 0.5)}`;
      if (operator === '^') return `${within(left, Level.atom)}^${within(right, Level.sign)}`;
      const second = within(right, contains(right, 'binary') ? Level.product + 0.5 : Level.product);
      // A quotient before a factor is bracketed: (1/2) G is no 1/(2 G).
      const isQuotient = left.type === 'binary' && left.operator === '/';
      const first = within(left, operator === '*' && isQuotient ? Level.atom : Level.product);
      return `${first}${operator === '/' ? '/' : ' '}${second}`;
    }
  }
}
