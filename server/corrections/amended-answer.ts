import { isDeepStrictEqual } from 'node:util';
import type { AnswerSpecification } from '@shared/answer-forms';
import { invalidField } from '../http/errors';

/** What a correction may change of a part's answer; everything else is what students were asked for. */
const amendable = new Set(['key', 'tolerance', 'minimumFidelity', 'slips', 'correct']);

/**
 * Checks that a correction amends key, tolerance or slips, and nothing else.
 *
 * @throws RequestError 400 where it changes more, or nothing
 */
export function demandAmendment(before: AnswerSpecification, after: AnswerSpecification): void {
  if (before.form === 'worked')
    throw invalidField(['answer'], 'People mark this part; it has no key, tolerance or slips that could be corrected.');
  if (before.form !== after.form)
    throw invalidField(
      ['answer', 'form'],
      'A correction cannot change the form of an answer: students have answered in it.',
    );
  const [was, is] = [entriesOf(before), entriesOf(after)];
  for (const name of new Set([...was.keys(), ...is.keys()])) {
    if (amendable.has(name) || isDeepStrictEqual(was.get(name), is.get(name))) continue;
    throw invalidField(
      ['answer', name],
      'A correction amends key, tolerance and slips, never what students were asked for.',
    );
  }
  if (isDeepStrictEqual(was, is)) throw invalidField(['answer'], 'Nothing is changed yet.');
}

/** What an answer's specification says, without what is left open. */
function entriesOf(answer: AnswerSpecification): ReadonlyMap<string, unknown> {
  const entries = Object.entries(answer).filter(
    ([, value]) => value !== undefined && !(Array.isArray(value) && value.length === 0),
  );
  return new Map(entries.map(([name, value]) => [name, JSON.parse(JSON.stringify(value)) as unknown]));
}

/** What a correction amends, in a student's words. */
export function amendedInWords(
  before: AnswerSpecification | undefined,
  after: AnswerSpecification | undefined,
): string {
  const was = before ? entriesOf(before) : new Map<string, unknown>();
  const is = after ? entriesOf(after) : new Map<string, unknown>();
  const differs = (name: string) => !isDeepStrictEqual(was.get(name), is.get(name));
  if (differs('key') || differs('correct')) return 'The key';
  if (differs('tolerance') || differs('minimumFidelity')) return 'The tolerance';
  return 'What the check recognises';
}
