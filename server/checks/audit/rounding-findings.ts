import type { AuditFinding } from '@shared/audit';
import { isComputed, type ComputedSpecification } from '@shared/answer-forms';
import { partLabel } from '@shared/problems';
import { real, type Complex } from '@shared/reading/complex';
import { namedGivens, splitStatement } from '@shared/statement';
import { numberKey } from '../compare-number';
import { asComplex, asList, asMatrix, KeyProblem, type ComputedKey } from '../key-value';
import { within } from '../tolerance';
import { findingsOf, type AuditedVariant, type AuditInput } from './audited';

/** Figures that students give where a statement says and shows nothing else. Common practice, no source. */
const usualFigures = 3;
const mostFigures = 8;

const words = ['one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight'] as const;

/** Whether honest rounding of a right answer, to the figures that the statement shows, still counts as right. */
export function roundingFindings(input: AuditInput, index: number): AuditFinding[] {
  const answer = input.content.parts[index]?.answer;
  if (!answer || !isComputed(answer)) return [];
  if (answer.form === 'state' || answer.form === 'formula' || answer.form === 'distribution') return [];
  const { over, of } = findingsOf(input, index);
  const shown = figuresShown(input, index);
  const misses = (variant: AuditedVariant, figures: number) => {
    const key = variant.parts[index]?.key?.key;
    return key !== undefined && !survives(answer, key, figures);
  };
  const enough = Array.from({ length: mostFigures }, (_, place) => place + 1).find(
    (figures) => figures >= shown.figures && !input.variants.some((variant) => misses(variant, figures)),
  );
  return over(
    'tolerance below rounding',
    'look at this',
    (variant) => misses(variant, shown.figures),
    (_first, where) =>
      `A student who rounds the right answer to (${partLabel(index)}) to ${inWords(shown.figures)}${shown.why} misses the tolerance in ${where}${
        enough === undefined
          ? ''
          : `; with ${inWords(enough)} in none${of === 1 ? '' : ' of them'}. Ask for ${inWords(enough)}, or widen the tolerance`
      }.`,
  );
}

function inWords(figures: number): string {
  return `${words[figures - 1] ?? String(figures)} ${figures === 1 ? 'figure' : 'figures'}`;
}

/**
 * To how many figures students will round: what the statement asks for, or else the fewest figures of the decimals that
 * it prints. A whole number is taken to be exact.
 */
function figuresShown(input: AuditInput, index: number): { readonly figures: number; readonly why: string } {
  const { stem, parts } = splitStatement(input.content.statement);
  const own = parts.find((part) => part.label === partLabel(index))?.text ?? '';
  for (const text of [own, stem]) {
    const asked = askedFigures(text);
    if (asked !== undefined) return { figures: asked, why: ', as the statement asks,' };
  }
  const printed = [...namedGivens(stem), ...namedGivens(own)].flatMap((name) =>
    input.variants.flatMap((variant) => {
      const figures = figuresIn(variant.givens[name]?.printed ?? '');
      return figures === undefined ? [] : [figures];
    }),
  );
  if (printed.length === 0) return { figures: usualFigures, why: '' };
  // A value of one figure, such as 0.5, is rarely meant as known to one figure.
  return { figures: Math.max(2, Math.min(...printed)), why: ', as many as the statement prints,' };
}

/** The figures that a text asks for: `to three significant figures`. */
function askedFigures(text: string): number | undefined {
  const found = new RegExp(`\\b(${words.join('|')}|[1-8])[ -](?:significant[ -])?(?:figures?|digits?)\\b`, 'i').exec(
    text,
  );
  if (!found?.[1]) return undefined;
  const place = words.indexOf(found[1].toLowerCase() as (typeof words)[number]);
  return place >= 0 ? place + 1 : Number(found[1]);
}

/** The significant figures of a printed decimal; undefined for a whole number. */
function figuresIn(printed: string): number | undefined {
  const [mantissa = ''] = printed.split('e');
  if (!mantissa.includes('.')) return undefined;
  return mantissa.replace(/[^0-9]/g, '').replace(/^0+/, '').length || undefined;
}

function survives(answer: Rounded, key: ComputedKey, figures: number): boolean {
  const round = (value: number) => Number(value.toPrecision(figures));
  const entries = entriesOf(answer, key);
  return entries.every((entry) => within({ re: round(entry.re), im: round(entry.im) }, entry, answer.tolerance));
}

type Rounded = Extract<ComputedSpecification, { form: 'number' | 'complex' | 'list' | 'matrix' }>;

function entriesOf(answer: Rounded, key: ComputedKey): readonly Complex[] {
  try {
    if (answer.form === 'number') return [real(numberKey(key, answer.unit).value)];
    if (answer.form === 'complex') return [asComplex(key.value)];
    return answer.form === 'list' ? asList(key.value) : asMatrix(key.value).flat();
  } catch (error) {
    // Said elsewhere.
    if (error instanceof KeyProblem) return [];
    throw error;
  }
}
