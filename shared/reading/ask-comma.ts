import type { AmbiguousComma } from './problem';
import type { ReadingOf } from './reading';

const small = [
  'zero',
  'one',
  'two',
  'three',
  'four',
  'five',
  'six',
  'seven',
  'eight',
  'nine',
  'ten',
  'eleven',
  'twelve',
  'thirteen',
  'fourteen',
  'fifteen',
  'sixteen',
  'seventeen',
  'eighteen',
  'nineteen',
  'twenty',
];

const inWords = (value: number): string => small[value] ?? String(value);

/** How large the number is with a decimal comma, in words: a little under five. */
function decimalInWords(whole: number, thousandths: number): string {
  if (thousandths === 0) return `exactly ${inWords(whole)}`;
  if (thousandths === 500) return `${inWords(whole)} and a half`;
  if (thousandths < 500) return `a little over ${inWords(whole)}`;
  return `a little under ${inWords(whole + 1)}`;
}

/** The question that an ambiguous comma raises, with both ways to write the answer without it. */
export function askAboutComma(text: string, { start, typed }: AmbiguousComma): ReadingOf<'question'> {
  const [whole = '0', decimals = '0'] = typed.split(',');
  const decimal = decimalInWords(Number(whole), Number(decimals));
  const grouped = `${Number(decimals) === 0 ? 'exactly' : 'over'} ${inWords(Number(whole))} thousand`;
  const replaced = (separator: string) =>
    `${text.slice(0, start)}${whole}${separator}${decimals}${text.slice(start + typed.length)}`;
  return {
    kind: 'question',
    question: `Is ${typed} ${decimal}, or ${grouped}?`,
    choices: [
      { label: `${whole}.${decimals}`, text: replaced('.') },
      { label: `${whole} ${decimals}`, text: replaced(' ') },
    ],
    at: start + 1,
  };
}
