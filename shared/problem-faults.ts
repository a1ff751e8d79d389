import { isComputed } from './answer-forms';
import type { FieldProblem } from './problem-details';
import { partLabel, partMarks, type Given, type ProblemContent } from './problems';
import { splitStatement } from './statement';

/** Most values that one given can be drawn from. */
export const mostSteps = 100_000;

/**
 * What is wrong with a problem whose fields are each in order by themselves: names used twice, steps that do not fit
 * their range, statements and parts that do not match. Keys are not evaluated here.
 *
 * @returns each fault with its path; none for a problem that may become a revision
 */
export function problemFaults(content: ProblemContent): readonly FieldProblem[] {
  return [...givenFaults(content.givens), ...statementFaults(content), ...content.parts.flatMap(partFaults)];
}

/** What is wrong with the givens as a whole. */
export function givenFaults(givens: readonly Given[]): readonly FieldProblem[] {
  const faults: FieldProblem[] = [];
  const seen = new Set<string>();
  for (const [index, given] of givens.entries()) {
    if (seen.has(given.name))
      faults.push({ path: ['givens', index, 'name'], message: `Another given is called ${given.name} already.` });
    seen.add(given.name);
    if (given.kind === 'uniform') faults.push(...rangeFaults(given, index));
  }
  return faults;
}

function rangeFaults({ low, high, step }: Extract<Given, { kind: 'uniform' }>, index: number): readonly FieldProblem[] {
  if (low > high)
    return [{ path: ['givens', index, 'high'], message: `The highest value, ${high}, lies below the lowest, ${low}.` }];
  const steps = (high - low) / step;
  if (steps > mostSteps)
    return [{ path: ['givens', index, 'step'], message: 'That makes more than 100,000 values; take a larger step.' }];
  // A step of 0.1 is no binary number, so "whole" allows for the rounding of the quotient.
  if (Math.abs(steps - Math.round(steps)) > 1e-6) {
    const last = Number((low + Math.floor(steps) * step).toPrecision(12));
    return [
      {
        path: ['givens', index, 'step'],
        message: `Steps of ${step} from ${low} do not meet ${high}; the last would be ${last}.`,
      },
    ];
  }
  return [];
}

function statementFaults(content: ProblemContent): readonly FieldProblem[] {
  const faults: FieldProblem[] = [];
  const fault = (message: string, place?: { position: number; length: number }) => {
    faults.push({ path: ['statement'], message, ...(place && { position: place.position, length: place.length }) });
  };
  if (content.statement.trim() === '') fault('Write the statement.');
  if (content.parts.length === 0) faults.push({ path: ['parts'], message: 'A problem needs at least one part.' });
  const names = new Set(content.givens.map((given) => given.name));
  for (const use of valUses(content.statement)) {
    if (!names.has(use.name)) fault(`No given is called “${use.name}”.`, use);
  }
  const openings = partOpenings(content.statement);
  for (const [index, opening] of openings.entries()) {
    const expected = partLabel(index);
    if (opening.label !== expected)
      fault(`This line opens part (${opening.label}), but (${expected}) comes next.`, opening);
    else if (index >= content.parts.length)
      fault(`This line opens part (${expected}), but there is no such part.`, opening);
  }
  // A single part needs no letter.
  if (content.parts.length > 1 || openings.length > 0) {
    for (let index = openings.length; index < content.parts.length; index++) {
      const label = partLabel(index);
      fault(`No line begins with (${label}), so students would not see where part (${label}) begins.`);
    }
  }
  return faults;
}

function partFaults(part: ProblemContent['parts'][number], index: number): readonly FieldProblem[] {
  const faults: FieldProblem[] = [];
  const at = ['parts', index] as const;
  const names = new Set<string>();
  for (const [place, criterion] of part.criteria.entries()) {
    if (names.has(criterion.name))
      faults.push({
        path: [...at, 'criteria', place, 'name'],
        message: `Another criterion is called ${criterion.name}.`,
      });
    names.add(criterion.name);
  }
  if (partMarks(part) === 0)
    faults.push({ path: [...at, 'criteria'], message: `Part (${partLabel(index)}) has no marks.` });
  if (isComputed(part.answer)) {
    for (const match of part.answer.key.matchAll(/\bpart_([a-z])\b/g)) {
      const used = (match[1] ?? '').charCodeAt(0) - 97;
      if (used >= index)
        faults.push({
          path: [...at, 'answer', 'key'],
          message: `part_${match[1] ?? ''} is not an earlier part, so its value cannot be used here.`,
          position: match.index,
          length: match[0].length,
        });
    }
  } else if (part.standsAlone.includes('right') && part.answer.form === 'worked') {
    faults.push({ path: [...at, 'standsAlone'], message: 'A worked part is always marked by a person.' });
  }
  return faults;
}

/** A place in a text. */
interface Place {
  /** From 0. */
  readonly position: number;
  readonly length: number;
}

/** The uses of `\val{name}` in a statement, in order, with their places. */
export function valUses(statement: string): readonly (Place & { readonly name: string })[] {
  return [...statement.matchAll(/\\val\{([^{}]*)\}/g)].map((match) => ({
    name: (match[1] ?? '').trim(),
    position: match.index,
    length: match[0].length,
  }));
}

function partOpenings(statement: string): readonly (Place & { readonly label: string })[] {
  const lines = statement.split('\n');
  return splitStatement(statement).parts.map(({ label, line }) => ({
    label,
    position: lines.slice(0, line).reduce((sum, each) => sum + each.length + 1, 0),
    length: (lines[line] ?? '').length,
  }));
}
