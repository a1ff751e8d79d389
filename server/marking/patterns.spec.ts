import type { CheckResult } from '@shared/checks';
import { describe, expect, it } from 'vitest';
import { inPatternOrder, seenIn } from './patterns';
import { buildCheck } from './testing/build-pile';

const twice = { name: 'twice the key', factor: 2 };
const square = { name: 'the square of the key' };

/** A wrong answer that may stand in some relations, the best by itself first. */
const wrong = (...possible: NonNullable<CheckResult['possible']>): CheckResult =>
  buildCheck(9, { relation: { name: possible[0]?.name ?? 'no known relation' }, possible });

function order(checks: readonly (CheckResult | null)[]) {
  return inPatternOrder(
    checks.map((check, index) => ({ id: String(index), code: `K${String(index)}`, seen: seenIn(check) })),
  );
}

describe('pattern order', () => {
  it('counts an answer that could be either to the mistake that others made', () => {
    const clear = { ...square, chance: 1e-4 };
    const { answers, patterns } = order([
      wrong({ ...twice, chance: 1e-4 }, clear),
      wrong(clear),
      wrong(clear),
      wrong(clear),
    ]);
    expect(patterns).toEqual([
      { key: `relation ${square.name}`, name: square.name, total: 4, evidence: 'beyond doubt' },
    ]);
    expect(answers.map(({ pattern }) => pattern)).toEqual(Array(4).fill(`relation ${square.name}`));
  });

  it('names no relation that chance explains', () => {
    const { patterns } = order([wrong({ name: '10⁷ times the key', chance: 0.02 }), buildCheck(2)]);
    expect(patterns.map(({ name, total }) => [name, total])).toEqual([
      ['right', 1],
      ['no relation', 1],
    ]);
  });

  it('keeps what is not checked and what cannot be read at the end', () => {
    const { patterns } = order([null, buildCheck(9, { verdict: 'unreadable' }), buildCheck(2), buildCheck(4)]);
    expect(patterns.map(({ name }) => name)).toEqual(['right', 'twice the key', 'unreadable', 'not checked']);
  });

  it('puts two thousand answers in order in no time', () => {
    const many = Array.from({ length: 2_000 }, (_, index) =>
      index % 2 === 0 ? buildCheck(2) : wrong({ ...twice, chance: 1e-4 }, { ...square, chance: 1e-3 }),
    );
    const start = performance.now();
    expect(order(many).answers).toHaveLength(2_000);
    expect(performance.now() - start).toBeLessThan(300);
  });
});
