import { AmbiguousComma, quote, ReadingProblem } from './problem';

/** How a comma between digits is taken: as a decimal comma, or as what separates entries. */
export type CommaRole = 'decimal' | 'separator';

/** A number as written. */
export interface WrittenNumber {
  readonly value: number;
  /** Digits with a decimal point and no grouping, as typed: `7.650`. */
  readonly digits: string;
  /** Power of ten written with e; undefined where there is none. */
  readonly exponent: number | undefined;
  /** Offset behind the last character. */
  readonly end: number;
}

const groupSpace = '[ \\u00a0\\u2007\\u2009\\u202f]';
const spacedGroups = new RegExp(`^\\d{1,3}(?:${groupSpace}\\d{3})+(?![\\d^⁰¹²³⁴⁵⁶⁷⁸⁹⁻])`);
const decimalGroups = new RegExp(`^\\d{3}(?:${groupSpace}\\d{3})+(?![\\d^.,⁰¹²³⁴⁵⁶⁷⁸⁹⁻])`);
/** A thin space only ever groups, so that the last group may be short. */
const thinGroups = /^\d{3}(?:[\u2009\u202f]\d{3})*[\u2009\u202f]\d{1,3}(?![\d^.,⁰¹²³⁴⁵⁶⁷⁸⁹⁻])/;
const exponentPart = /^[eE]([-+\u2212\u2013\u2010\u2011]?)(\d+)/;

const vulgarFractions: Readonly<Record<string, readonly [number, number]>> = {
  '½': [1, 2],
  '⅓': [1, 3],
  '⅔': [2, 3],
  '¼': [1, 4],
  '¾': [3, 4],
  '⅕': [1, 5],
  '⅖': [2, 5],
  '⅗': [3, 5],
  '⅘': [4, 5],
  '⅙': [1, 6],
  '⅚': [5, 6],
  '⅐': [1, 7],
  '⅛': [1, 8],
  '⅜': [3, 8],
  '⅝': [5, 8],
  '⅞': [7, 8],
  '⅑': [1, 9],
  '⅒': [1, 10],
};

/** Whether a number may begin at this place. */
export function startsNumber(text: string, at: number): boolean {
  const character = text[at] ?? '';
  if (character in vulgarFractions) return true;
  return /\d/.test(character) || (character === '.' && /\d/.test(text[at + 1] ?? ''));
}

/** The text of a number with its groups joined, and where its mantissa ends. */
function mantissa(text: string, start: number, comma: CommaRole): { digits: string; end: number } {
  const rest = text.slice(start);
  const commas = comma === 'decimal' ? (/^\d+((?:,\d+)+)/.exec(rest)?.[1] ?? '') : '';
  if (commas.length > 0) {
    const whole = /^\d+/.exec(rest)?.[0] ?? '';
    const groups = commas.slice(1).split(',');
    const grouping = /^[1-9]\d{0,2}$/.test(whole) && groups.every((group) => group.length === 3);
    const end = start + whole.length + commas.length;
    const decimals = /^\.\d*/.exec(text.slice(end))?.[0] ?? '';
    if (groups.length > 1 || decimals.length > 1) {
      if (!grouping)
        throw new ReadingProblem(
          `${quote(whole + commas + decimals)} has commas in odd places; write a plain number.`,
          start,
        );
      return { digits: whole + groups.join('') + decimals, end: end + decimals.length };
    }
    if (grouping) throw new AmbiguousComma(start, whole + commas);
    return { digits: `${whole}.${groups.join('')}`, end };
  }
  const pointGroups = /^[1-9]\d{0,2}(?:\.\d{3})+,\d+/.exec(rest) ?? /^[1-9]\d{0,2}(?:\.\d{3}){2,}(?![\d.])/.exec(rest);
  if (comma === 'decimal' && pointGroups) {
    return { digits: pointGroups[0].replace(/\./g, '').replace(',', '.'), end: start + pointGroups[0].length };
  }
  const grouped = spacedGroups.exec(rest)?.[0];
  const whole = grouped ?? /^\d*/.exec(rest)?.[0] ?? '';
  let digits = whole.replace(/\D/g, '');
  let end = start + whole.length;
  const separator = text[end];
  const decimalComma = comma === 'decimal' && separator === ',' && /\d/.test(text[end + 1] ?? '');
  if (separator === '.' || decimalComma) {
    const after = text.slice(end + 1);
    const decimals = decimalGroups.exec(after)?.[0] ?? thinGroups.exec(after)?.[0] ?? /^\d*/.exec(after)?.[0] ?? '';
    digits += `.${decimals.replace(/\D/g, '')}`;
    end += 1 + decimals.length;
    const next = text[end] ?? '';
    if (next === '.' || (comma === 'decimal' && next === ',' && /\d/.test(text[end + 1] ?? ''))) {
      throw new ReadingProblem(`${quote(text.slice(start, end + 2))} has two decimal signs.`, end);
    }
  }
  return { digits, end };
}

/**
 * Reads the number that begins at `start`: decimal point or comma, digits grouped in threes by spaces, an exponent, a
 * fraction sign alone or after a whole number (`1½`). Throws {@link AmbiguousComma} where a comma could be either.
 */
export function lexNumber(text: string, start: number, comma: CommaRole): WrittenNumber {
  const fraction = vulgarFractions[text[start] ?? ''];
  if (fraction) {
    const value = fraction[0] / fraction[1];
    return { value, digits: String(value), exponent: undefined, end: start + 1 };
  }
  const { digits, end } = mantissa(text, start, comma);
  const mixed = /^[ \u00a0\u2009\u202f]?([¼-¾⅐-⅞])/.exec(text.slice(end));
  const mixedFraction = vulgarFractions[mixed?.[1] ?? ''];
  if (mixed && mixedFraction && !digits.includes('.')) {
    const value = Number(digits) + mixedFraction[0] / mixedFraction[1];
    return { value, digits: String(value), exponent: undefined, end: end + mixed[0].length };
  }
  const exponent = exponentPart.exec(text.slice(end));
  if (!exponent) return { value: Number(digits), digits, exponent: undefined, end };
  const power = (exponent[1] && exponent[1] !== '+' ? -1 : 1) * Number(exponent[2]);
  const value = Number(`${digits}e${power}`);
  if (value === 0 && /[1-9]/.test(digits))
    throw new ReadingProblem('This number is too small to be told from 0.', start);
  return { value, digits, exponent: power, end: end + exponent[0].length };
}
