import { defaultConvention } from '@shared/primitives';
import { emptyDraft, emptyGiven, emptyPart, emptySlip, type DraftPart, type ProblemDraft } from '@shared/problem-draft';
import { newId } from '../http/new-id';

/** For tests: a part that asks for the mean number of photons behind a splitter. */
export function buildPart(overrides: Partial<DraftPart['answer']> = {}): DraftPart {
  const part = emptyPart(newId(), newId());
  return {
    ...part,
    heading: 'mean photons',
    answer: {
      ...part.answer,
      key: '(1 - T)*nbar',
      slips: [
        { ...emptySlip(), name: 'T for R', expression: 'T*nbar', feedback: 'That is output 1.', fraction: '1/2' },
      ],
      ...overrides,
    },
  };
}

/** For tests: a draft that can become a revision. */
export function buildDraft(overrides: Partial<ProblemDraft> = {}): ProblemDraft {
  return {
    ...emptyDraft('A splitter', defaultConvention),
    statement: 'Light of $\\bar n = \\val{nbar}$ meets a splitter of $T = \\val{T}$.\n(a) How many photons leave?',
    tags: 'splitters',
    givens: [
      { ...emptyGiven('nbar'), symbol: '\\bar n', low: '2', high: '8', step: '0.5' },
      { ...emptyGiven('T'), kind: 'choice', values: '0.35; 0.70; 0.85' },
    ],
    parts: [buildPart()],
    ...overrides,
  };
}
