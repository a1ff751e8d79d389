import { printComplex, printNumber } from '@shared/reading/print';

/** A key's or an answer's value in a line: a number, a complex number, a list of them, or text. */
export function printValue(value: unknown, figures = 6): string {
  if (typeof value === 'number') return printNumber(value, figures);
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return `[${value.map((each) => printValue(each, figures)).join(', ')}]`;
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value)
    return printComplex({ re: Number(value.re), im: Number(value.im) }, figures);
  return '';
}
