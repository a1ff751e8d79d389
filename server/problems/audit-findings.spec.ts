import { afterAll, describe, expect, it } from 'vitest';
import type { FindingGrade, FindingKind } from '@shared/audit';
import { emptyGiven, emptySlip, type DraftGiven, type DraftPart, type ProblemDraft } from '@shared/problem-draft';
import { readDraft } from '@shared/read-draft';
import { auditKeys } from '../checks/audit/audit-keys';
import { createKeyPool } from '../keys';
import { buildDraft, buildPart } from '../testing/build-draft';
import { drawAudited } from './audit-variants';

const keys = createKeyPool({ size: 1 });
afterAll(() => keys.close());

const given = (name: string, more: Partial<DraftGiven>): DraftGiven => ({ ...emptyGiven(name), symbol: name, ...more });
const slip = (name: string, expression: string) => ({
  ...emptySlip(),
  name,
  expression,
  feedback: 'No.',
  fraction: '1/2',
});
const nbar = given('nbar', { low: '2.0', high: '8.0', step: '0.1' });
const T = given('T', { kind: 'choice', values: '0.35; 0.70; 0.85' });
const withoutSlips = (answer: Partial<DraftPart['answer']>) => [buildPart({ slips: [], ...answer })];

/** A problem in which nothing is to be found, with what a case changes. */
const sound = (overrides: Partial<ProblemDraft> = {}) =>
  buildDraft({
    statement:
      'Light of $\\bar n = \\val{nbar}$ meets a splitter of $T = \\val{T}$. Give three significant figures.\n(a) How many photons leave?',
    givens: [nbar, T],
    ...overrides,
  });

async function auditOf(draft: ProblemDraft) {
  const { content, faults } = readDraft(draft);
  if (!content) throw new Error(JSON.stringify(faults));
  return auditKeys(await drawAudited(keys, content, () => undefined));
}

const tolerance = (more: Partial<DraftPart['answer']['tolerance']>) => ({
  relative: '',
  absolute: '',
  significantFigures: '',
  totalVariation: '',
  ...more,
});

/** What is found, how it is graded, words of its sentence; a problem that has it, and one that has it not. */
const cases: readonly (readonly [FindingKind, FindingGrade, string, Partial<ProblemDraft>, Partial<ProblemDraft>])[] = [
  [
    'key without value',
    'stops use',
    'transmissivity',
    { parts: withoutSlips({ key: 'meanPhotons(lose(coherent(2), nbar/7))' }) },
    { parts: withoutSlips({ key: 'meanPhotons(lose(coherent(2), nbar/9))*T' }) },
  ],
  [
    'key without value',
    'stops use',
    'not one',
    { parts: withoutSlips({ key: '1/(T - 0.35)*nbar' }) },
    { parts: withoutSlips({ key: '1/(T - 0.3)*nbar' }) },
  ],
  [
    'slip equals key',
    'stops use',
    'would pass as right',
    { givens: [nbar, given('T', { kind: 'choice', values: '0.35; 0.50; 0.85' })] },
    {},
  ],
  [
    'slip inside tolerance',
    'stops use',
    'inside the tolerance',
    { givens: [nbar, given('T', { kind: 'choice', values: '0.35; 0.501; 0.85' })] },
    {},
  ],
  [
    'slips coincide',
    'look at this',
    'cannot be told from',
    { parts: [buildPart({ slips: [slip('one', 'T*nbar'), slip('other', 'nbar*T')] })] },
    { parts: [buildPart({ slips: [slip('one', 'T*nbar'), slip('other', 'nbar/T')] })] },
  ],
  [
    'slip without value',
    'look at this',
    'not found there',
    { parts: [buildPart({ slips: [slip('half', 'nbar/(T - 0.35)')] })] },
    { parts: [buildPart({ slips: [slip('half', 'nbar/(T - 0.3)')] })] },
  ],
  [
    'tolerance below rounding',
    'look at this',
    'three figures, as the statement asks',
    { parts: withoutSlips({ tolerance: tolerance({ relative: '0.001' }) }) },
    { parts: withoutSlips({ tolerance: tolerance({ significantFigures: '3' }) }) },
  ],
  [
    'tolerance below rounding',
    'look at this',
    'two figures, as many as the statement prints',
    { statement: 'Of $\\val{nbar}$ and $\\val{T}$:\n(a) How many photons leave?', parts: withoutSlips({}) },
    { parts: withoutSlips({}) },
  ],
  [
    'unit mismatch',
    'stops use',
    'names no unit',
    { givens: [{ ...nbar, unit: 'MHz' }, T], parts: withoutSlips({ key: 'nbar*T' }) },
    { givens: [{ ...nbar, unit: 'MHz' }, T], parts: withoutSlips({ key: 'nbar*T', unit: 'kHz' }) },
  ],
  [
    'unit mismatch',
    'stops use',
    'not the kind of quantity',
    { givens: [{ ...nbar, unit: 'MHz' }, T], parts: withoutSlips({ key: 'nbar*T', unit: 'm' }) },
    { givens: [{ ...nbar, unit: 'mm' }, T], parts: withoutSlips({ key: 'nbar*T', unit: 'm' }) },
  ],
  [
    'key of another kind',
    'stops use',
    'add to',
    {
      parts: withoutSlips({
        form: 'distribution',
        key: '[T, T, nbar/10]',
        tolerance: tolerance({ totalVariation: '0.01' }),
      }),
    },
    {
      parts: withoutSlips({
        form: 'distribution',
        key: '[T/2, T/2, nbar/100]',
        tolerance: tolerance({ totalVariation: '0.01' }),
      }),
    },
  ],
  [
    'relative tolerance at zero',
    'stops use',
    'accepts nothing but 0',
    { parts: withoutSlips({ key: '(nbar - 4)*T' }) },
    { parts: withoutSlips({ key: '(nbar - 4)*T', tolerance: tolerance({ relative: '0.01', absolute: '0.01' }) }) },
  ],
  [
    'given without use',
    'look at this',
    'phase',
    { givens: [nbar, T, given('phase', { low: '0', high: '3', step: '0.1' })] },
    {},
  ],
  [
    'given without value',
    'stops use',
    'has no value',
    { givens: [nbar, T, given('x', { kind: 'derived', expression: '1/(T - 0.35)', significantFigures: '3' })] },
    { givens: [nbar, T, given('x', { kind: 'derived', expression: '1/(T - 0.3)', significantFigures: '3' })] },
  ],
  [
    'answer in the statement',
    'stops use',
    'out = ',
    {
      givens: [nbar, T, given('out', { kind: 'derived', expression: '(1 - T)*nbar', significantFigures: '4' })],
      statement:
        'Of $\\val{nbar}$ and $\\val{T}$, that is $\\val{out}$, to three figures:\n(a) How many photons leave?',
    },
    { givens: [nbar, T, given('out', { kind: 'derived', expression: '(1 - T)*nbar', significantFigures: '4' })] },
  ],
  [
    'variants repeat',
    'look at this',
    'only 6 variants',
    { givens: [given('nbar', { low: '2', high: '3', step: '1' }), T] },
    {},
  ],
  ['variants repeat', 'look at this', 'the same key', { parts: withoutSlips({ key: 'nbar*T/(nbar*T)' }) }, {}],
  [
    'variants repeat',
    'look at this',
    'stands in a list twice',
    { givens: [nbar, given('T', { kind: 'choice', values: '0.35; 0.35; 0.85' })] },
    {},
  ],
  [
    'variants unequal',
    'look at this',
    'a factor of',
    { parts: withoutSlips({ key: 'exp(-3*nbar)*T' }) },
    { parts: withoutSlips({ key: 'exp(-nbar/2)*T' }) },
  ],
  [
    'convention not named',
    'look at this',
    'a vacuum variance of',
    { parts: withoutSlips({ key: 'quadratureVariance(squeezed(nbar/10), 0)*T' }) },
    {
      parts: withoutSlips({ key: 'quadratureVariance(squeezed(nbar/10), 0)*T' }),
      statement:
        'Squeezing reduces the variance of the quadrature $x$; the vacuum has the variance 1/2. $\\val{nbar}$, $\\val{T}$, three figures.\n(a) Find it.',
    },
  ],
];

describe('the key audit', () => {
  it('finds nothing in a sound problem, and says what is in order', async () => {
    const { findings, parts } = await auditOf(sound());
    expect(findings).toEqual([]);
    expect(parts[0]?.inOrder).toMatch(/^Keys finite, in size from 0\.3 to 5\.2\. The slip keeps clear/);
  });

  it.each(cases)(
    'finds “%s” (%s, “%s”) where it is, and not where it is not',
    async (kind, grade, words, has, hasNot) => {
      const { findings } = await auditOf(sound(has));
      const found = findings.find((each) => each.kind === kind && each.sentence.includes(words));
      expect(findings.map((each) => each.sentence).join('\n')).toContain(words);
      expect(found?.grade).toBe(grade);
      if (!['given without use', 'variants repeat', 'variants unequal'].includes(kind))
        expect(found?.variant?.givens).toContain('nbar = ');
      const without = await auditOf(sound(hasNot));
      expect(without.findings.filter((each) => each.kind === kind)).toEqual([]);
    },
  );

  it('names in how many variants, and the one that shows it', async () => {
    const { findings } = await auditOf(
      sound({ givens: [nbar, given('T', { kind: 'choice', values: '0.35; 0.50; 0.85' })] }),
    );
    expect(findings[0]).toMatchObject({ grade: 'stops use', count: 61, part: 0 });
    expect(findings[0]?.sentence).toContain('in 61 of 183 variants');
    expect(findings[0]?.variant).toEqual({ number: 2, givens: 'nbar = 2.0, T = 0.50' });
  });

  it('finds that two methods disagree', async () => {
    const { content } = readDraft(sound());
    if (!content) throw new Error('The draft is wrong.');
    const drawn = await drawAudited(keys, content, () => undefined);
    const variants = drawn.variants.map((variant, index) => ({
      ...variant,
      parts: variant.parts.map((part) => ({
        ...part,
        key: index === 3 ? { fault: 'phase space and number basis disagree: 1 and 2' } : part.key,
      })),
    }));
    const { findings } = auditKeys({ ...drawn, variants });
    expect(findings).toMatchObject([{ kind: 'methods disagree', grade: 'stops use', count: 1 }]);
  });

  it('draws 500 variants of a problem that has more, and tells how far it is', async () => {
    const { content } = readDraft(sound({ givens: [given('nbar', { low: '2.00', high: '8.00', step: '0.01' }), T] }));
    if (!content) throw new Error('The draft is wrong.');
    const told: number[] = [];
    const drawn = await drawAudited(keys, content, (done) => told.push(done));
    expect(drawn.variants).toHaveLength(500);
    expect(told.at(-1)).toBe(500);
    expect(told.length).toBeGreaterThan(10);
  });

  it('looks at states and formulas too', async () => {
    const state = withoutSlips({
      form: 'state',
      key: '(ket(1,0) + T*ket(0,1))',
      minimumFidelity: '0.99',
      slips: [slip('sign', '(T*ket(0,1) + ket(1,0))*i'), slip('minus', '(ket(1,0) - T*ket(0,1))')],
    });
    expect((await auditOf(sound({ parts: state }))).findings.map(({ kind }) => kind)).toContain('slip equals key');
    const formula = withoutSlips({
      form: 'formula',
      key: 'G*nbar + (G - 1)*T',
      variables: [{ name: 'G', low: '1', high: '5', integers: false, symbol: '', spellings: '' }],
      slips: [slip('bracket', 'G*(nbar + T) - T'), slip('no noise', 'G*nbar')],
    });
    const { findings } = await auditOf(sound({ parts: formula }));
    expect(findings.filter(({ grade }) => grade === 'stops use').map(({ kind }) => kind)).toEqual(['slip equals key']);
    expect(findings[0]?.sentence).toContain('bracket');
  });
});
