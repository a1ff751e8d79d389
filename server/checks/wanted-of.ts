import type { AnswerSpecification } from '@shared/answer-forms';
import type { Wanted } from '../keys';
import { comparedPoints, formulaPoints } from './formula-points';

/** What the expressions of a part are to come to: a state, or a formula's values at the points where it is compared. */
export function wantedOf(answer: AnswerSpecification): Wanted | undefined {
  if (answer.form === 'state') return { kind: 'state' };
  if (answer.form !== 'formula') return undefined;
  return { kind: 'formula', points: formulaPoints(answer.variables), enough: comparedPoints };
}
