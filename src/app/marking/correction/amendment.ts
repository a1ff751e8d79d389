import { isComputed, optionLabel, type AnswerSpecification } from '@shared/answer-forms';
import { typeFraction, typeNumber } from '@shared/typed-number';
import { toleranceNames } from './correction-fields';

/** One thing that a correction amends, before and after. */
export interface Amendment {
  readonly what: string;
  readonly before: string;
  readonly after: string;
}

/** What differs between a part as it was checked and as it is to be, in words. */
export function amendmentsOf(before: AnswerSpecification, after: AnswerSpecification): readonly Amendment[] {
  const [was, is] = [describe(before), describe(after)];
  return [...new Set([...was.keys(), ...is.keys()])].flatMap((what) => {
    const [from, to] = [was.get(what) ?? 'none', is.get(what) ?? 'none'];
    return from === to ? [] : [{ what, before: from, after: to }];
  });
}

function describe(answer: AnswerSpecification): ReadonlyMap<string, string> {
  const words = new Map<string, string>();
  if (answer.form === 'choice') {
    const labels = answer.options.map(optionLabel).filter((label) => answer.correct.includes(label));
    words.set('correct', (labels.length > 0 ? labels : answer.correct).join(', '));
  }
  if (!isComputed(answer)) return words;
  words.set('key', answer.key);
  if (answer.form === 'state') words.set('least fidelity', typeNumber(answer.minimumFidelity));
  else {
    const tolerance: Readonly<Partial<Record<string, number | undefined>>> = answer.tolerance;
    const parts = toleranceNames(answer).flatMap((name) => {
      const value = tolerance[name];
      return value === undefined ? [] : [`${toleranceNouns[name]} ${typeNumber(value)}`];
    });
    words.set('tolerance', parts.join(', '));
  }
  for (const [index, slip] of (answer.slips ?? []).entries()) {
    const feedback = slip.feedback === '' ? '' : `: ${slip.feedback}`;
    words.set(
      `slip ${String(index + 1)}`,
      `${slip.name ? `${slip.name}, ` : ''}${slip.expression}, ${typeFraction(slip.fraction)} of the marks${feedback}`,
    );
  }
  return words;
}

const toleranceNouns = {
  relative: 'relative',
  absolute: 'absolute',
  significantFigures: 'significant figures',
  totalVariation: 'total variation',
} as const;
