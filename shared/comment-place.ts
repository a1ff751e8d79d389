import { splitStatement } from './statement';

/** A line as a comment on it remembers it. */
export interface RememberedLine {
  /** From 1, in the statement as it was saved last. */
  readonly line: number;
  /** What stood there when the comment was written. */
  readonly text: string;
}

/**
 * Where a line of one text is found in another that was made of it: lines before and after what changed keep their
 * place; one within it goes where its words went, or else stays as far from the beginning of the change as it was.
 *
 * @param line from 1
 */
export function moveLine(before: string, after: string, line: number): number {
  if (before === after) return line;
  const [old, fresh] = [before.split('\n'), after.split('\n')];
  const shorter = Math.min(old.length, fresh.length);
  let same = 0;
  while (same < shorter && old[same] === fresh[same]) same++;
  let end = 0;
  while (end < shorter - same && old[old.length - 1 - end] === fresh[fresh.length - 1 - end]) end++;
  if (line <= same) return line;
  if (line > old.length - end) return Math.min(line, old.length) + fresh.length - old.length;
  const text = old[line - 1];
  const middle = fresh.slice(same, fresh.length - end);
  const found = middle.flatMap((each, index) => (each === text && text.trim() !== '' ? [same + index + 1] : []));
  const [first, ...others] = found;
  if (first !== undefined)
    return others.reduce((best, each) => (Math.abs(each - line) < Math.abs(best - line) ? each : best), first);
  return Math.max(1, Math.min(line, same + Math.max(1, middle.length)));
}

/** Where a remembered line stands in a statement, and whether it reads as it did. */
export function placeOfLine(
  statement: string,
  { line, text }: RememberedLine,
): { readonly line: number; readonly hasChanged: boolean } {
  const lines = statement.split('\n');
  const place = Math.max(1, Math.min(line, lines.length));
  return { line: place, hasChanged: lines[place - 1] !== text };
}

/**
 * The lines of a statement that are a part's own: from the one that opens it to the last one before the next part that
 * is not blank.
 *
 * @param label `a`, `b` …
 * @returns lines from `from` (from 0) up to, not including, `to`; null where the statement does not open the part
 */
export function linesOfPart(
  statement: string,
  label: string,
): { readonly from: number; readonly to: number; readonly text: string } | null {
  const { parts } = splitStatement(statement);
  const index = parts.findIndex((part) => part.label === label);
  const from = parts[index]?.line;
  if (from === undefined) return null;
  const lines = statement.split('\n');
  let to = parts[index + 1]?.line ?? lines.length;
  while (to > from + 1 && lines[to - 1]?.trim() === '') to--;
  return { from, to, text: lines.slice(from, to).join('\n') };
}

/** A statement in which some lines (from 0; the last one excluded) are replaced by wording. */
export function replaceLines(statement: string, from: number, to: number, wording: string): string {
  const lines = statement.split('\n');
  return [...lines.slice(0, from), ...wording.split('\n'), ...lines.slice(to)].join('\n');
}
