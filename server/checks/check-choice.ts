import type { AnswerSpecification } from '@shared/answer-forms';
import type { Reading } from '@shared/reading/reading';
import type { Check } from './check';
import { certain } from './possible-relations';
import { equalRelation, noRelation } from './relation';

/** Judges a choice: right where exactly the correct options are named. Several on a single choice are wrong. */
export function checkChoice(reading: Reading, part: Extract<AnswerSpecification, { form: 'choice' }>): Check {
  const chosen = reading.kind === 'choice' ? reading.labels : [];
  const lower = (labels: readonly string[]) => new Set(labels.map((label) => label.toLowerCase()));
  const [given, correct] = [lower(chosen), lower(part.correct)];
  const right = given.size === correct.size && [...given].every((label) => correct.has(label));
  const tooMany = !part.several && given.size > 1;
  const relation = right ? equalRelation : given.size === 0 ? noRelation : { name: `chose ${chosen.join(', ')}` };
  return {
    verdict: right ? 'right' : 'wrong',
    fraction: right ? 1 : 0,
    readAs: 'readAs' in reading ? reading.readAs : '',
    relation,
    ...(right ? {} : { possible: [{ ...relation, chance: certain }] }),
    value: null,
    keyValue: null,
    reading,
    ...(tooMany ? { problem: 'Several options are named, and only one is right.' } : {}),
  };
}
