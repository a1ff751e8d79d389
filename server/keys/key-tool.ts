import { createInterface } from 'node:readline';
import { z } from 'zod';
import { defaultConvention } from '../optics/convention';
import { KeyEvaluator } from './key-task';
import type { GivenValue } from './value';

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

for await (const text of createInterface({ input: process.stdin, crlfDelay: Infinity }))
  if (text.trim() !== '') process.stdout.write(`${answer(text)}\n`);
