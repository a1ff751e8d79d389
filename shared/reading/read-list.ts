import { real, type Complex } from './complex';
import { dropLeadingName } from './dropped-name';
import type { CommaRole } from './lex-number';
import { parserFor, type Parser } from './parser';
import { negligible, printNumber } from './print';
import { AmbiguousComma, ReadingProblem } from './problem';
import { numberGrammar, readValue, type ReadValue } from './read-number';
import type { Reading, ReadUnit } from './reading';

const pairs: Readonly<Record<string, string>> = { '(': ')', '[': ']', '{': '}' };

/** Whether one bracket encloses the whole text. */
export function isBracketed(text: string): boolean {
  const trimmed = text.replace(/\\left|\\right|\\(?=[{}])/g, '').trim();
  if (!(trimmed.charAt(0) in pairs)) return false;
  let depth = 0;
  for (const [index, character] of [...trimmed].entries()) {
    if ('([{'.includes(character)) depth += 1;
    if (')]}'.includes(character)) depth -= 1;
    if (depth === 0) return index === [...trimmed].length - 1;
  }
  return false;
}

/** A reading kept between entries: real where its imaginary part is rounding. */
export const tidy = (value: Complex): Complex => (negligible(value.im, value.re) ? real(value.re) : value);

/** Entries up to the end of the text or the bracket that closes them. */
function entries(parser: Parser, separator: 'comma' | 'semicolon', bracketed: boolean): readonly ReadValue[] {
  const result: ReadValue[] = [];
  const open = bracketed ? parser.take() : undefined;
  const closes = () => (open ? parser.is('close') : parser.is('end'));
  while (!closes() || result.length === 0) {
    if (parser.is('comma') || parser.is('semicolon'))
      throw new ReadingProblem('An entry is missing here.', parser.token.start);
    if (closes()) throw new ReadingProblem('There are no entries in the brackets.', parser.token.start);
    result.push(readValue(parser.sum()));
    if (closes()) break;
    if (!parser.is(separator)) throw parser.unexpected();
    parser.take();
  }
  if (open) {
    if (parser.token.text !== pairs[open.text]) throw parser.unexpected();
    parser.take();
  }
  if (!parser.is('end')) throw parser.unexpected();
  return result;
}

function attempt(text: string, comma: CommaRole, separator: 'comma' | 'semicolon', bracketed: boolean) {
  return entries(parserFor(text, { ...numberGrammar, comma }), separator, bracketed);
}

/**
 * The entries of a list: separated by semicolons or lines, else by commas in brackets. Without either, commas separate
 * where they cannot be decimal commas: where a space follows each, or where digits would make no number.
 */
function readEntries(given: string): readonly ReadValue[] {
  const bracketed = isBracketed(given);
  const text = given.replace(/\s*\n/g, (line) => ';'.padStart(line.length));
  if (text.includes(';')) return attempt(text, 'decimal', 'semicolon', bracketed);
  if (bracketed) return attempt(text, 'separator', 'comma', true);
  if (text.includes(',') && !/,\S/.test(text)) return attempt(text, 'separator', 'comma', false);
  try {
    return attempt(text, 'decimal', 'semicolon', false);
  } catch (error) {
    const commas = (text.match(/,/g) ?? []).length;
    const undecided = error instanceof AmbiguousComma && commas === 1;
    if (undecided || commas === 0 || !(error instanceof ReadingProblem || error instanceof AmbiguousComma)) throw error;
    return attempt(text, 'separator', 'comma', false);
  }
}

/** The one unit of several values; values in different units are of no common kind, and named as such. */
function commonUnit(values: readonly ReadValue[]): ReadUnit | undefined {
  return values.find(({ unit }) => unit !== undefined)?.unit;
}

/** Reads a list of numbers, real or complex. */
export function readList(text: string, form: 'list' | 'distribution'): Reading {
  const undressed = dropLeadingName(text.trimEnd(), numberGrammar);
  const values = readEntries(undressed.text);
  const list = values.map(({ value }) => tidy(value));
  const unit = commonUnit(values);
  const complex = list.findIndex(({ im }) => im !== 0);
  if (form === 'distribution' && complex >= 0) {
    throw new ReadingProblem(`Entry ${complex + 1} is a complex number; probabilities are real.`);
  }
  const count = values.length === 1 ? 'one value' : `${values.length} values`;
  const total = list.reduce((sum, { re }) => sum + re, 0);
  return {
    kind: 'list',
    entries: list,
    readAs: values.map(({ readAs }) => readAs).join('; '),
    note: form === 'distribution' ? `${count}, sum ${printNumber(total, 4)}` : count,
    ...(unit ? { unit } : {}),
    ...(undressed.dropped === undefined ? {} : { dropped: undressed.dropped }),
  };
}
