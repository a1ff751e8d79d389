import { afterAll, describe, expect, it } from 'vitest';
import { readDraft } from '@shared/read-draft';
import { createKeyPool } from '../keys';
import { buildDraft, buildPart } from '../testing/build-draft';
import { derivationOrder } from './derive-givens';
import { drawVariant, drawVariants, VariantError } from './draw-variant';
import { evaluateOutcomes } from './evaluate-outcomes';
import { evaluateVariantKeys, evaluateWithEarlier } from './evaluate-variant-keys';

const keys = createKeyPool({ size: 1 });
afterAll(() => keys.close());

function buildContent(overrides: Parameters<typeof buildDraft>[0] = {}) {
  const { content, faults } = readDraft(buildDraft(overrides));
  if (!content) throw new Error(JSON.stringify(faults));
  return content;
}

const twoParts = {
  statement: '(a) How many?\n(b) And twice?',
  parts: [buildPart({ slips: [] }), buildPart({ key: '2*part_a', slips: [] })],
};

describe('drawVariant', () => {
  const derived = { ...buildDraft().givens[0]!, name: 'R', kind: 'derived' as const, expression: '1 - T' };

  it('draws the same whole variant for the same seed', async () => {
    const content = buildContent({ givens: [...buildDraft().givens, { ...derived, significantFigures: '2' }] });
    const [one, other, third] = await drawVariants(keys, content, ['set/1', 'set/1', 'set/2']);
    expect(one).toEqual(other);
    expect(Object.keys(third!).sort()).toEqual(['R', 'T', 'nbar']);
    expect(one!['R']!.value).toBeCloseTo(1 - one!['T']!.value, 12);
    expect(await drawVariant(keys, content, 'set/1')).toEqual(one);
  });

  it('says which given has no value', async () => {
    const content = buildContent({ givens: [...buildDraft().givens, { ...derived, expression: 'log(T - T)/0' }] });
    await expect(drawVariant(keys, content, 'seed')).rejects.toThrow(VariantError);
  });
});

describe('derivationOrder', () => {
  const given = (name: string, expression: string) => ({
    kind: 'derived' as const,
    name,
    symbol: name,
    spellings: [],
    expression,
    significantFigures: 4,
  });

  it('puts each given behind those it needs', () => {
    const { order, faults } = derivationOrder([given('c', 'a*b'), given('b', 'a + 1'), given('a', '2')]);
    expect(order.map((each) => each.name)).toEqual(['a', 'b', 'c']);
    expect(faults).toEqual([]);
  });

  it('refuses circles, of one too', () => {
    expect(derivationOrder([given('a', 'a + 1')]).faults[0]?.message).toBe('a is derived from itself.');
    expect(derivationOrder([given('a', 'b'), given('b', 'c'), given('c', 'a')]).faults).toHaveLength(1);
  });
});

describe('keys of a variant', () => {
  it('use the keys of earlier parts', async () => {
    const content = buildContent(twoParts);
    const givens = await drawVariant(keys, content, 'seed');
    const [first, second] = await evaluateVariantKeys(keys, content, givens);
    expect(second?.key?.key?.value).toBeCloseTo(2 * Number(first?.key?.key?.value), 12);
  });

  it('are recomputed with a student’s own earlier values', async () => {
    const content = buildContent(twoParts);
    const givens = await drawVariant(keys, content, 'seed');
    const followed = await evaluateWithEarlier(keys, content, givens, 1, { part_a: 1.7 });
    expect(followed.key?.key?.value).toBeCloseTo(3.4, 12);
  });

  it('have no value where an earlier key that they use has none', async () => {
    const content = buildContent({ ...twoParts, parts: [buildPart({ key: 'nbar*', slips: [] }), twoParts.parts[1]!] });
    const givens = await drawVariant(keys, content, 'seed');
    const [first, second] = await evaluateVariantKeys(keys, content, givens);
    expect(first?.key?.fault).toBeDefined();
    expect(second?.key?.fault?.message).toContain('part_a');
  });

  it('are not waited for past the deadline', async () => {
    const convention = buildContent().convention;
    const request = { expression: '1 + 1', givens: {}, convention };
    const never = { evaluateMany: () => new Promise<never>(() => undefined) };
    const [late] = await evaluateOutcomes(never, [request], performance.now() + 20);
    expect(late?.fault?.message).toContain('take too long');
    const [past] = await evaluateOutcomes(keys, [request], performance.now() - 1);
    expect(past?.fault).toBeDefined();
  });
});
