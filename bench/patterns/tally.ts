/** One answer: what the student did, and the name that its pattern was given. */
export interface Told {
  /** Problem and part. */
  readonly part: string;
  /** Null where it is right, or wrong in no way that has a name. */
  readonly made: string | null;
  readonly told: string | null;
  readonly agrees: boolean;
  readonly verdict: string;
  readonly text: string;
}

/** Verdicts that leave nothing to be named. */
const accepted = new Set(['right', 'unit', 'follow-through']);

/** Recall over the mistakes made, precision over the names given, and the differences in words, most frequent first. */
export function tally(answers: readonly Told[]) {
  const seen = answers.filter(({ made, verdict }) => made !== null && !accepted.has(verdict));
  const found = seen.filter(({ told, agrees }) => told !== null && agrees);
  const named = answers.filter(({ told }) => told !== null);
  const rightly = named.filter(({ agrees }) => agrees);
  const differences = new Map<string, { count: number; example: string }>();
  for (const { part, made, told, agrees, verdict, text } of answers) {
    if (agrees || (told === null && (made === null || accepted.has(verdict)))) continue;
    const words = `${part}: ${made ?? 'no mistake with a name'} told as ${told ?? verdict}`;
    const before = differences.get(words);
    differences.set(words, { count: (before?.count ?? 0) + 1, example: before?.example ?? text });
  }
  return {
    made: seen.length,
    found: found.length,
    named: named.length,
    rightly: rightly.length,
    recall: found.length / seen.length,
    precision: rightly.length / named.length,
    unseen: answers.filter(({ made, verdict }) => made !== null && accepted.has(verdict)).length,
    wrongly: [...differences]
      .sort(([, one], [, other]) => other.count - one.count)
      .slice(0, 20)
      .map(([words, { count, example }]) => `${String(count)} × ${words}, such as ${example}`),
  };
}
