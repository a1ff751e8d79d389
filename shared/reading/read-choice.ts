import { quote, ReadingProblem } from './problem';
import type { Reading } from './reading';

/** Reads the labels of options, in either case, several separated by commas: `b`, `A, C`, `(a)`. */
export function readChoice(text: string, labels: readonly string[]): Reading {
  const byName = new Map(labels.map((label) => [label.toLowerCase(), label]));
  const chosen: string[] = [];
  for (const found of text.matchAll(/[^\s,;]+/gu)) {
    const typed = found[0];
    const bare = byName.has(typed.toLowerCase()) ? typed : typed.replace(/^[([]|[)\].]$/g, '');
    const label = byName.get(bare.toLowerCase());
    if (label === undefined)
      throw new ReadingProblem(`${quote(typed)} is none of the options ${labels.join(', ')}.`, found.index);
    if (!chosen.includes(label)) chosen.push(label);
  }
  if (chosen.length === 0) throw new ReadingProblem('Name an option by its label.', 0);
  // In the order of the options, so that a, c and c, a are the same answer.
  const ordered = labels.filter((label) => chosen.includes(label));
  return { kind: 'choice', labels: ordered, readAs: ordered.join(', ') };
}
