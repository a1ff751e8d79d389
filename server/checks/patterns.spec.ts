import { answerSpecification } from '@shared/answer-forms';
import { describe, expect, it } from 'vitest';
import type { CheckInput } from './check-answer';
import { seeded } from './fuzz/random-answers';
import { patternsOf, type PatternAnswer } from './patterns';

const part = answerSpecification.parse({
  form: 'number',
  key: 'k',
  tolerance: { relative: 0.01 },
  slips: [{ name: 'other output', expression: 's', feedback: 'The other output.', fraction: 0.5 }],
});
if (part.form !== 'number') throw new Error('Not a number.');
const numberPart = part;

/** What a student does to the key; null where the answer is no known mistake. */
const mistakes: readonly (readonly [
  name: string | null,
  weight: number,
  apply: (key: number, next: () => number) => number,
])[] = [
  ['right', 0.55, (key) => key],
  ['twice the key', 0.08, (key) => 2 * key],
  ['half the key', 0.03, (key) => key / 2],
  ['the square root of the key, an amplitude for an intensity', 0.06, (key) => Math.sqrt(key)],
  ['the square of the key', 0.03, (key) => key * key],
  ['the key with the other sign', 0.04, (key) => -key],
  ['one minus the key', 0.04, (key) => 1 - key],
  ['2π times the key', 0.03, (key) => 2 * Math.PI * key],
  ['10³ times the key', 0.02, (key) => 1000 * key],
  ['slip: other output', 0.05, (key) => Math.exp(-key) / 3],
  [null, 0.07, (key, next) => key * Math.exp(4 * next() - 2) * (1 + 0.05 * next())],
];

function simulate(count: number, seed: number, figures: number) {
  const next = seeded(seed);
  const truth = new Map<string, string | null>();
  const answers = Array.from({ length: count }, (_, index): PatternAnswer => {
    const key = 0.05 + 0.9 * next();
    let draw = next();
    const chosen = mistakes.find(([, weight]) => (draw -= weight) < 0) ?? mistakes[0];
    if (!chosen) throw new Error('No mistakes.');
    const id = String(index);
    truth.set(id, chosen[0]);
    const text = chosen[2](key, next).toPrecision(figures);
    const input: CheckInput = {
      part: numberPart,
      text,
      keys: { key: { value: key }, slips: [{ value: Math.exp(-key) / 3 }] },
    };
    return { id, input };
  });
  return { answers, truth };
}

/** Share of the mistakes that are found under their own name, and share of the names given that are true. */
function score(count: number, seed: number, figures: number) {
  const { answers, truth } = simulate(count, seed, figures);
  let made = 0;
  let found = 0;
  let named = 0;
  let true_ = 0;
  for (const pattern of patternsOf(answers)) {
    for (const id of pattern.ids) {
      const wanted = truth.get(id) ?? null;
      const mistake = wanted !== null && wanted !== 'right';
      if (mistake) made += 1;
      if (pattern.kind !== 'relation' && pattern.kind !== 'slip') continue;
      named += 1;
      if (pattern.name === wanted) {
        found += 1;
        true_ += 1;
      }
    }
  }
  return { recall: found / made, precision: true_ / named };
}

describe('patterns', () => {
  it('finds the mistakes that were made, in piles of 118', () => {
    const scores = [1, 2, 3, 4, 5].map((seed) => score(118, seed, 4));
    const mean = (pick: (each: (typeof scores)[number]) => number) =>
      scores.reduce((sum, each) => sum + pick(each), 0) / scores.length;
    expect(mean(({ recall }) => recall)).toBeGreaterThanOrEqual(0.95);
    expect(mean(({ precision }) => precision)).toBeGreaterThanOrEqual(0.98);
  });

  it('finds them in answers of three figures, and in two thousand answers', () => {
    const three = score(600, 11, 3);
    expect(three.recall).toBeGreaterThanOrEqual(0.95);
    expect(three.precision).toBeGreaterThanOrEqual(0.95);
    const many = score(2000, 12, 4);
    expect(many.recall).toBeGreaterThanOrEqual(0.95);
    expect(many.precision).toBeGreaterThanOrEqual(0.98);
  });

  it('groups across variants, with verdicts and the strength of the evidence', () => {
    const answer = (id: string, key: number, text: string): PatternAnswer => ({
      id,
      input: { part: numberPart, text, keys: { key: { value: key } } },
    });
    const found = patternsOf([
      answer('a', 0.301, '0.602'),
      answer('b', 0.713, '1.426'),
      answer('c', 0.457, '0.914'),
      answer('d', 0.5, '0.5'),
      answer('e', 0.5, ''),
      answer('f', 0.5, '1,234'),
      answer('g', 0.3771, '5.92113'),
    ]);
    expect(found[0]).toMatchObject({
      kind: 'relation',
      name: 'twice the key',
      factor: 2,
      ids: ['a', 'b', 'c'],
      evidence: 'beyond doubt',
    });
    expect(found.map(({ kind, ids }) => [kind, ids.length])).toEqual(
      expect.arrayContaining([
        ['right', 1],
        ['unanswered', 1],
        ['unreadable', 1],
        ['none', 1],
      ]) as unknown,
    );
  });

  it('finds nothing in nothing', () => expect(patternsOf([])).toEqual([]));
});
