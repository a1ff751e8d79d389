import { checkLine, type CheckedLine } from '../check-line';

/** A part as a line of the check tool has it; the key comes first because every case has one. */
export type LinePart = Readonly<Record<string, unknown>>;

/** A number with one percent of tolerance. */
export const numberWith = (key: string, more: LinePart = {}): LinePart => ({
  form: 'number',
  key,
  tolerance: { relative: 0.01 },
  ...more,
});

/** What the check tool answers to a line. */
export function judgeLine(part: LinePart, answer: string, more: LinePart = {}): CheckedLine {
  return checkLine(JSON.stringify({ part, answer, ...more }));
}

/** The verdict with its fraction, and the slip's index where it is one: `slip 0.5 #1`. */
export function verdictOf(part: LinePart, answer: string, more: LinePart = {}): string {
  const checked = judgeLine(part, answer, more);
  if ('error' in checked) return `error: ${checked.error}`;
  const slip = checked.slip === undefined ? '' : ` #${checked.slip}`;
  return `${checked.verdict} ${checked.fraction}${slip}`;
}
