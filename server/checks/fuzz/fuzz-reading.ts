import { isFiniteComplex, real, type Complex } from '@shared/reading/complex';
import { evaluateNumber } from '@shared/reading/quantity';
import { readAnswer } from '@shared/reading/read-answer';
import type { AnswerField, Reading } from '@shared/reading/reading';
import { pathologicalAnswers } from './pathological-answers';
import { randomAnswer, seeded } from './random-answers';

const variables = ['nbar', 'n', 'kappa', 'omega', 'alpha', 't', 'G', 'T_1'].map((name) => ({ name }));

/** One field of every form. */
export const everyField: readonly AnswerField[] = [
  { form: 'number', hint: 'pure number' },
  { form: 'number', hint: 'with a unit', unit: 'MHz' },
  { form: 'complex' },
  { form: 'list' },
  { form: 'distribution' },
  { form: 'matrix' },
  { form: 'state' },
  { form: 'formula', variables },
  { form: 'choice', labels: ['a', 'b', 'C'], several: true },
];

function numbersOf(reading: Reading): readonly Complex[] {
  switch (reading.kind) {
    case 'number':
      return [real(reading.value), real(reading.si)];
    case 'complex':
      return [reading.value];
    case 'list':
      return reading.entries;
    case 'matrix':
      return reading.rows.flat();
    case 'state':
      return [real(reading.norm), ...reading.kets.map(({ amplitude }) => amplitude)];
    default:
      return [];
  }
}

/** What is wrong with a reading, or undefined: nothing read may be NaN or infinite, and what is not read says why. */
export function faultOf(reading: Reading): string | undefined {
  if (reading.kind === 'unreadable') {
    const own = reading.problem.replace(/“[^”]*”/g, '');
    if (own.length < 8 || /undefined|NaN|\[object/.test(own)) return `says only "${reading.problem}"`;
    return reading.at !== undefined && !(reading.at >= 1) ? `points at ${reading.at}` : undefined;
  }
  if (reading.kind === 'question') return reading.choices.length === 2 ? undefined : 'asks without choices';
  if (reading.kind === 'empty') return undefined;
  if (!numbersOf(reading).every(isFiniteComplex)) return 'read a value that is not finite';
  if (/undefined|NaN|\[object/.test(reading.readAs)) return `prints "${reading.readAs}"`;
  if (reading.kind === 'formula') {
    const scope = new Map(variables.map(({ name }, index) => [name, real(0.7 + index)]));
    evaluateNumber(reading.expression, scope);
  }
  return undefined;
}

export interface FuzzReport {
  readonly readings: number;
  readonly read: number;
  readonly faults: readonly string[];
  readonly slowest: { readonly milliseconds: number; readonly text: string };
}

const suspicious = 5;

/** Reads one text in one field, and says what is wrong with that and how long it took. */
export function tryReading(text: string, field: AnswerField): { fault?: string; read: boolean; milliseconds: number } {
  const start = performance.now();
  let fault: string | undefined;
  let read = false;
  try {
    const reading = readAnswer(text, field);
    fault = faultOf(reading);
    read = reading.kind !== 'unreadable';
  } catch (error) {
    fault = `threw ${String(error)}`;
  }
  let milliseconds = performance.now() - start;
  // A pause of the machine is told from a slow text by reading it again.
  for (let again = 0; fault === undefined && milliseconds > suspicious && again < 3; again += 1) {
    const restart = performance.now();
    readAnswer(text, field);
    milliseconds = Math.min(milliseconds, performance.now() - restart);
  }
  return { ...(fault === undefined ? {} : { fault }), read, milliseconds };
}

/**
 * Reads every pathological text in every field and then `count` random ones, each in one of the fields in turn, and
 * reports what went wrong.
 */
export function fuzzReading(count: number, seed: number): FuzzReport {
  const next = seeded(seed);
  const faults: string[] = [];
  let readings = 0;
  let read = 0;
  let slowest = { milliseconds: 0, text: '' };
  const attempt = (text: string, field: AnswerField) => {
    const outcome = tryReading(text, field);
    readings += 1;
    if (outcome.fault !== undefined)
      faults.push(`${field.form} ${JSON.stringify(text.slice(0, 200))} ${outcome.fault}`);
    if (outcome.read) read += 1;
    if (outcome.milliseconds > slowest.milliseconds) slowest = { milliseconds: outcome.milliseconds, text };
  };
  for (const text of pathologicalAnswers) for (const field of everyField) attempt(text, field);
  for (let index = 0; index < count; index += 1) {
    const field = everyField[index % everyField.length];
    if (field) attempt(randomAnswer(next), field);
  }
  return { readings, read, faults, slowest };
}
