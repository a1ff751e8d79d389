import { createInterface } from 'node:readline';
import { z } from 'zod';
import { defaultConvention } from '../optics/convention';
import { KeyEvaluator } from './key-task';
import { longestEvaluation, tooLong } from './limits';
import type { GivenValue } from './value';
import { withinTime } from './within-time';

const line = z.object({
  expression: z.string(),
  givens: z.record(z.string(), z.unknown()).default({}),
  convention: z
    .object({
      vacuumVariance: z.number().positive(),
      squeezingSign: z.union([z.literal(1), z.literal(-1)]),
      splitterPhase: z.number(),
    })
    .partial()
    .default({}),
});

const evaluator = new KeyEvaluator();

/** One line of the key tool: JSON in, JSON out; a line that cannot be read or evaluated gives `{"error": …}`. */
function answer(text: string): string {
  let parsed: unknown;
  try {
    parsed = JSON.parse(text);
  } catch {
    // Whatever is no JSON is said to be none.
    return JSON.stringify({ error: 'This line is not JSON.' });
  }
  const read = line.safeParse(parsed);
  if (!read.success) {
    const [issue] = read.error.issues;
    return JSON.stringify({ error: `${issue?.path.join('.') ?? ''}: ${issue?.message ?? 'cannot be read'}` });
  }
  const { convention, expression } = read.data;
  const givens = read.data.givens as Readonly<Record<string, GivenValue>>;
  const outcome = evaluator.evaluate({
    expression,
    givens,
    convention: { ...defaultConvention, ...withoutGaps(convention) },
  });
  return JSON.stringify(outcome.key ?? { error: outcome.fault.message });
}

function withoutGaps<T extends object>(parts: T): { [K in keyof T]?: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(parts).filter(([, value]) => value !== undefined)) as never;
}

/** A watch is set for all lines that begin within so many milliseconds: one for each would take longer than most keys. */
const together = 50;

/** Answers lines in their order; one that runs away says so, and the next are answered. */
function answerAll(lines: readonly string[]): string {
  const answers: string[] = [];
  while (answers.length < lines.length) {
    const inTime = withinTime(longestEvaluation + together, () => {
      const began = performance.now();
      do answers.push(answer(lines[answers.length] ?? ''));
      while (answers.length < lines.length && performance.now() - began < together);
    });
    if (!inTime) answers.push(JSON.stringify({ error: tooLong.fault.message }));
  }
  return answers.map((each) => `${each}\n`).join('');
}

let waiting: string[] = [];

function answerWaiting(): void {
  const lines = waiting;
  waiting = [];
  if (lines.length > 0) process.stdout.write(answerAll(lines));
}

createInterface({ input: process.stdin, crlfDelay: Infinity })
  .on('line', (text) => {
    if (text.trim() === '') return;
    if (waiting.length === 0) setImmediate(answerWaiting);
    waiting.push(text);
  })
  .on('close', answerWaiting);
