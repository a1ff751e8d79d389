import { emptyOption, emptyVariable, type DraftAnswer } from '@shared/problem-draft';
import type { AnswerForm } from '@shared/answer-forms';

/** What an answer of each form is called, in the order of the list. */
export const formWords: Readonly<Record<AnswerForm, string>> = {
  number: 'a number',
  complex: 'a complex number',
  list: 'a list of numbers',
  distribution: 'probabilities',
  matrix: 'a matrix',
  state: 'a state',
  formula: 'a formula',
  choice: 'a choice',
  worked: 'words and pages',
};

/** What the key of each form is, for an empty editor. */
export const keyHints: Readonly<Partial<Record<AnswerForm, string>>> = {
  number: 'For example nbar*(1 - T), or a figure of a state',
  complex: 'For example amplitude(damp(coherent(2), kappa, t)), or exp(i*phi)/sqrt(2)',
  list: 'For example [nbar*T, nbar*(1 - T)]',
  distribution: 'For example photonDistribution(coherent(sqrt(nbar)), 4)',
  matrix: 'For example covariance(squeezed(r)), or [[1, i], [-i, 1]]/2',
  state: 'For example (ket(1, 0) + i*ket(0, 1))/sqrt(2), or heralded(twinBeam(r), 2, 1)',
  formula: 'In the variables above and in givens, for example nbar*exp(-kappa*t)',
};

/**
 * What choosing a form adds to what is typed: a first option, variable or tolerance where there is none yet. Nothing that
 * was typed for another form is touched.
 */
export function beginForm(answer: DraftAnswer, form: AnswerForm): Partial<DraftAnswer> {
  const { tolerance, minimumFidelity, options, variables } = answer;
  switch (form) {
    case 'distribution':
      return tolerance.totalVariation === '' ? { form, tolerance: { ...tolerance, totalVariation: '2%' } } : { form };
    case 'state':
      return minimumFidelity === '' ? { form, minimumFidelity: '0.99' } : { form };
    case 'formula':
      return variables.length === 0 ? { form, variables: [emptyVariable()] } : { form };
    case 'choice':
      return options.length === 0 ? { form, options: ['A', 'B', 'C'].map(emptyOption) } : { form };
    default:
      return { form };
  }
}

/** The first capital letter that no option has yet. */
export function nextLabel(labels: readonly string[]): string {
  const taken = new Set(labels.map((label) => label.trim().toUpperCase()));
  return [...'ABCDEFGHIJKLMNOPQRSTUVWXYZ'].find((letter) => !taken.has(letter)) ?? '';
}
