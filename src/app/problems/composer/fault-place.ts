import type { FieldProblem } from '@shared/problem-details';
import type { ProblemDraft } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';

/** Where a fault is: the tab that shows it, and its place in words. */
export interface FaultPlace {
  /** `givens`, `about`, or the letter of a part; null for what is above the tabs. */
  readonly tab: string | null;
  readonly words: string;
}

const fieldWords: Readonly<Record<string, string>> = {
  key: 'key',
  variables: 'variables',
  options: 'options',
  correct: 'correct option',
  minimumFidelity: 'fidelity',
  unit: 'unit',
  tolerance: 'tolerance',
  slips: 'slip',
  criteria: 'mark scheme',
  standsAlone: 'what stands alone',
  followThrough: 'follow-through',
  heading: 'heading',
  expression: 'expression',
};

/** Finds the place of a fault. */
export function faultPlace(fault: FieldProblem, draft: ProblemDraft): FaultPlace {
  const [area, index, ...rest] = fault.path;
  if (area === 'givens') {
    const name = typeof index === 'number' ? draft.givens[index]?.name : undefined;
    return { tab: 'givens', words: name ? `Given ${name}` : 'Givens' };
  }
  if (area === 'parts' && typeof index === 'number') {
    const label = partLabel(index);
    const field = rest.find((step) => typeof step === 'string' && step in fieldWords);
    return { tab: label, words: `(${label})${typeof field === 'string' ? ` ${fieldWords[field] ?? ''}` : ''}` };
  }
  if (area === 'tags' || area === 'safety' || area === 'convention')
    return { tab: 'about', words: 'About the problem' };
  if (area === 'parts') return { tab: null, words: 'Parts' };
  return { tab: null, words: area === 'title' ? 'Title' : 'Statement' };
}
