import { afterAll, describe, expect, it } from 'vitest';
import type { DraftAnswer, DraftVariable } from '@shared/problem-draft';
import { emptySlip, emptyVariable } from '@shared/problem-draft';
import { readDraft } from '@shared/read-draft';
import { variantKey } from '@shared/checks';
import { createKeyPool } from '../keys';
import { buildDraft, buildPart } from '../testing/build-draft';
import { checkProblem } from './check-problem';

const keys = createKeyPool({ size: 1 });
afterAll(() => keys.close());

const givens = { nbar: { value: 4, printed: '4' }, T: { value: 0.7, printed: '0.70' } };
const variable = (change: Partial<DraftVariable>): DraftVariable => ({ ...emptyVariable(), ...change });

const answers: readonly Partial<DraftAnswer>[] = [
  {
    form: 'state',
    minimumFidelity: '0.99',
    key: 'sqrt(T)*ket(1, 0) + i*sqrt(1 - T)*ket(0, 1)',
    slips: [
      {
        ...emptySlip(),
        name: 'real',
        expression: 'sqrt(T)*ket(1, 0) + sqrt(1 - T)*ket(0, 1)',
        fraction: '1/2',
        feedback: 'A reflection turns the phase.',
      },
    ],
  },
  {
    form: 'formula',
    key: 'nbar*exp(-kappa*t)',
    variables: [
      variable({ name: 'kappa', low: '0', high: '2', spellings: 'k' }),
      variable({ name: 't', low: '0', high: '3' }),
    ],
    slips: [
      {
        ...emptySlip(),
        name: 'amplitude',
        expression: 'nbar*exp(-kappa*t/2)',
        fraction: '1/2',
        feedback: 'That is the amplitude.',
      },
    ],
  },
  { form: 'list', key: '[T*nbar, (1 - T)*nbar]', slips: [] },
  {
    form: 'distribution',
    key: 'photonDistribution(lose(fock(1), T), 1)',
    slips: [],
    tolerance: { relative: '', absolute: '', significantFigures: '', totalVariation: '2%' },
  },
  {
    form: 'choice',
    options: [
      { label: 'A', text: '', correct: false },
      { label: 'B', text: 'bunched', correct: true },
    ],
  },
];

/** Judges one answer to each part. */
async function judge(...texts: readonly string[]) {
  const statement = '$\\val{nbar}$, $\\val{T}$\n(a) A.\n(b) B.\n(c) C.\n(d) D.\n(e) E.';
  const { content, faults } = readDraft(buildDraft({ statement, parts: answers.map((answer) => buildPart(answer)) }));
  if (!content) throw new Error(faults[0]?.message);
  return checkProblem(
    keys,
    content,
    givens,
    texts.map((text) => ({ text, hasPages: false })),
  );
}

describe('checkProblem', () => {
  it('finds right what is right in every form, however it is written', async () => {
    const results = await judge('i sqrt(0.7)|1,0> - sqrt(0.3)|0,1>', '4 e^{-k t}', '2.8; 1.2', '[0.3, 0.7]', 'b');
    expect(results.map((result) => result?.verdict)).toEqual(['right', 'right', 'right', 'right', 'right']);
  });

  it('finds slips of states and formulas, and what is wrong', async () => {
    const results = await judge('sqrt(0.7)|1,0> + sqrt(0.3)|0,1>', '4 exp(-κ t/2)', '1.2; 2.8', '0.7; 0.3', 'A');
    expect(results.map((result) => result?.verdict)).toEqual(['slip', 'slip', 'wrong', 'wrong', 'wrong']);
    expect(results[0]).toMatchObject({ slip: 0, fraction: 0.5 });
  });

  it('keeps keys of states and formulas in words, without what answers are compared with', async () => {
    const [state, formula] = await judge('|1,0>', '4', '', '', '');
    expect(state?.key?.value).toBe('0.5477i |0,1⟩ + 0.8367 |1,0⟩');
    expect(formula?.key?.value).toBe('nbar*exp(-kappa*t)');
    for (const result of [state, formula]) expect(variantKey.strict().safeParse(result?.key).success).toBe(true);
  });
});
