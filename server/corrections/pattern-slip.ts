import { isComputed, type AnswerSpecification } from '@shared/answer-forms';

/** A group's relation to the key as an expression of it; `K` stands for the key. */
const written: Readonly<Record<string, string>> = {
  'the key with the other sign': '-K',
  'the complex conjugate of the key': 'conj(K)',
  'twice the key': '2*K',
  'half the key': 'K/2',
  'one minus the key': '1 - K',
  'the square of the key': 'K^2',
  'the square root of the key, an amplitude for an intensity': 'sqrt(K)',
  'the reciprocal of the key': '1/K',
  '√2 times the key': 'sqrt(2)*K',
  'the key over √2': 'K/sqrt(2)',
  '2π times the key': '2*pi*K',
  'the key over 2π': 'K/(2*pi)',
  'four times the key': '4*K',
  'a quarter of the key': 'K/4',
  'π times the key': 'pi*K',
  'the key over π': 'K/pi',
  'the key in degrees instead of radians': 'K*180/pi',
  'the key in radians instead of degrees': 'K*pi/180',
  'minus twice the key': '-2*K',
  'minus half the key': '-K/2',
  'the modulus of the key': 'abs(K)',
  'the modulus squared of the key': 'abs(K)^2',
  'the key times i': 'i*K',
  'the key times −i': '-i*K',
  'the key minus one': 'K - 1',
  'the key plus one': 'K + 1',
};

const powers: Readonly<Record<string, string>> = { 'ten times the key': '10*K', 'a tenth of the key': 'K/10' };
const superscripts = '⁰¹²³⁴⁵⁶⁷⁸⁹';

/**
 * The expression of a slip that the answers of a pattern are, from the name of their relation to the key.
 *
 * @param earlier the labels of the parts before, whose keys an expression may name
 * @returns the expression, or undefined where none says it
 */
export function slipOfRelation(
  name: string,
  answer: AnswerSpecification,
  earlier: readonly string[],
): string | undefined {
  if (!isComputed(answer)) return undefined;
  const part = /^the key of part \(([a-z])\)$/.exec(name)?.[1];
  if (part !== undefined) return earlier.includes(part) ? `part_${part}` : undefined;
  const pattern = written[name] ?? powers[name] ?? powerOfTen(name);
  return pattern?.replace('K', () => inBrackets(answer.key));
}

/** `10⁻³ times the key` as an expression. */
function powerOfTen(name: string): string | undefined {
  const found = /^10(⁻?)([⁰¹²³⁴⁵⁶⁷⁸⁹]+) times the key$/.exec(name);
  if (!found) return undefined;
  const digits = [...(found[2] ?? '')].map((sign) => superscripts.indexOf(sign)).join('');
  return `1e${found[1] ? '-' : ''}${digits}*K`;
}

/** A name or a single call needs no brackets. */
function inBrackets(key: string): string {
  return /^[A-Za-z_]\w*$/.test(key.trim()) || isOneCall(key.trim()) ? key.trim() : `(${key.trim()})`;
}

function isOneCall(key: string): boolean {
  if (!/^[A-Za-z_]\w*\(.*\)$/.test(key)) return false;
  let depth = 0;
  for (const [place, sign] of [...key].entries()) {
    if (sign === '(') depth += 1;
    if (sign === ')') depth -= 1;
    if (depth === 0 && sign === ')' && place < key.length - 1) return false;
  }
  return true;
}
