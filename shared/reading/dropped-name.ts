import type { Grammar } from './grammar';
import { parseExpression } from './parser';
import { AmbiguousComma, ReadingProblem } from './problem';

const nameLike = /^[\p{L}\\⟨<〈|∣(][\p{L}\p{M}\p{Nd}ℏ∆_{}()[\]\\^,|∣⟩>⟨<〉〈'′*²³⁽⁾⁰¹⁻⁺ \u00a0&₀-₉ₐ-ₜ]{0,59}$/u;
/** A name with its sign takes no more characters than this. */
const longestName = 80;
const relation = /[=≈≃≅≡∼~]|:=/u;

/** A text whose leading `name =` is set apart, with blanks in its place so that positions stay. */
export interface Undressed {
  readonly text: string;
  readonly dropped?: string;
}

/** The first relation sign outside all brackets, or the first at all where they do not close. */
function relationOutside(text: string): RegExpExecArray | null {
  const start = text.slice(0, longestName);
  for (const found of start.matchAll(new RegExp(relation, 'gu'))) {
    const before = start.slice(0, found.index);
    const opened = before.match(/[([{]/g)?.length ?? 0;
    const closed = before.match(/[)\]}]/g)?.length ?? 0;
    if (opened <= closed) return found;
  }
  return relation.exec(text);
}

/** Whether a ket or bra is left open: `|α = 2⟩` is no name with a value behind it. */
const leavesKetOpen = (text: string): boolean =>
  /[|∣][^|∣⟩>〉]*$/u.test(text) && (text.match(/[|∣]/gu) ?? []).length % 2 === 1;

/** Whether the text can be worked out as it stands, and so is a value rather than a name. */
function isArithmetic(text: string, grammar: Grammar): boolean {
  try {
    const node = parseExpression(text, { ...grammar, units: false, kets: false, variables: new Map() });
    return node.type !== 'constant';
  } catch (error) {
    if (error instanceof ReadingProblem || error instanceof AmbiguousComma) return false;
    throw error;
  }
}

/**
 * Sets a leading `name =` (or `≈`) apart: `P = 0.35` is read as 0.35. What stands before the sign must look like a
 * name, not like something to work out: `sqrt(2)/2 = 0.7071` holds two values and is left as it is.
 */
export function dropLeadingName(text: string, grammar: Grammar): Undressed {
  const found = relationOutside(text);
  if (!found) return { text };
  const before = text.slice(0, found.index).trim();
  const end = found.index + found[0].length;
  // P(n = 3) is a name with a relation of its own in its brackets.
  if (
    before !== '' &&
    (!nameLike.test(before.replace(/[=≈:]/gu, '')) || leavesKetOpen(before) || isArithmetic(before, grammar))
  )
    return { text };
  const dropped = text.slice(0, end).trim();
  return { text: ' '.repeat(end) + text.slice(end), dropped };
}
