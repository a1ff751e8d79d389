import { splitStatement } from '@shared/statement';
import {
  emptyCriterion,
  emptyGiven,
  emptyPart,
  emptySlip,
  type DraftAnswer,
  type DraftCriterion,
  type DraftGiven,
  type DraftPart,
  type DraftSlip,
  type ProblemDraft,
} from '@shared/problem-draft';
import { partLabel, type CriterionKind } from '@shared/problems';

/*
 * Changes of a draft, each from one draft to the next; nothing is changed in place, so that what follows from a draft
 * is computed again exactly where it changed.
 */

function changeAt<Item>(items: readonly Item[], index: number, change: Partial<Item>): Item[] {
  return items.map((item, place) => (place === index ? { ...item, ...change } : item));
}

function without<Item>(items: readonly Item[], index: number): Item[] {
  return items.filter((_, place) => place !== index);
}

/** The list with one item moved; where there is no such place it stays as it is. */
export function moved<Item>(items: readonly Item[], from: number, to: number): Item[] {
  const item = items[from];
  if (item === undefined || to < 0 || to >= items.length) return [...items];
  const rest = without(items, from);
  return [...rest.slice(0, to), item, ...rest.slice(to)];
}

export function changeGiven(draft: ProblemDraft, index: number, change: Partial<DraftGiven>): ProblemDraft {
  return { ...draft, givens: changeAt(draft.givens, index, change) };
}

export function addGiven(draft: ProblemDraft, name = ''): ProblemDraft {
  return { ...draft, givens: [...draft.givens, emptyGiven(name)] };
}

export function removeGiven(draft: ProblemDraft, index: number): ProblemDraft {
  return { ...draft, givens: without(draft.givens, index) };
}

export function changePart(draft: ProblemDraft, index: number, change: Partial<DraftPart>): ProblemDraft {
  return { ...draft, parts: changeAt(draft.parts, index, change) };
}

/** Adds a part, and the line that opens it. */
export function addPart(draft: ProblemDraft, newId: () => string): ProblemDraft {
  const label = partLabel(draft.parts.length);
  // Whoever wrote the statement first has opened the part there already.
  const isOpened = splitStatement(draft.statement).parts.some((part) => part.label === label);
  const statement = draft.statement.replace(/\s+$/, '');
  return {
    ...draft,
    statement: isOpened ? draft.statement : `${statement}${statement === '' ? '' : '\n'}(${label}) `,
    parts: [...draft.parts, emptyPart(newId(), newId())],
  };
}

export function removePart(draft: ProblemDraft, index: number): ProblemDraft {
  return { ...draft, parts: without(draft.parts, index) };
}

export function movePart(draft: ProblemDraft, from: number, to: number): ProblemDraft {
  return { ...draft, parts: moved(draft.parts, from, to) };
}

export function changeAnswer(draft: ProblemDraft, part: number, change: Partial<DraftAnswer>): ProblemDraft {
  const present = draft.parts[part];
  return present ? changePart(draft, part, { answer: { ...present.answer, ...change } }) : draft;
}

export function changeTolerance(
  draft: ProblemDraft,
  part: number,
  change: Partial<DraftAnswer['tolerance']>,
): ProblemDraft {
  const present = draft.parts[part];
  return present ? changeAnswer(draft, part, { tolerance: { ...present.answer.tolerance, ...change } }) : draft;
}

export function changeSlip(draft: ProblemDraft, part: number, index: number, change: Partial<DraftSlip>): ProblemDraft {
  return changeAnswer(draft, part, { slips: changeAt(draft.parts[part]?.answer.slips ?? [], index, change) });
}

export function addSlip(draft: ProblemDraft, part: number): ProblemDraft {
  return changeAnswer(draft, part, { slips: [...(draft.parts[part]?.answer.slips ?? []), emptySlip()] });
}

export function removeSlip(draft: ProblemDraft, part: number, index: number): ProblemDraft {
  return changeAnswer(draft, part, { slips: without(draft.parts[part]?.answer.slips ?? [], index) });
}

export function changeCriterion(
  draft: ProblemDraft,
  part: number,
  index: number,
  change: Partial<DraftCriterion>,
): ProblemDraft {
  return changePart(draft, part, { criteria: changeAt(draft.parts[part]?.criteria ?? [], index, change) });
}

export function addCriterion(draft: ProblemDraft, part: number, kind: CriterionKind, id: string): ProblemDraft {
  const criteria = draft.parts[part]?.criteria ?? [];
  return changePart(draft, part, { criteria: [...criteria, emptyCriterion(id, kind, nextName(criteria, kind))] });
}

/** The first name of a kind that is free: M1, M2 … */
export function nextName(criteria: readonly Pick<DraftCriterion, 'name'>[], kind: CriterionKind): string {
  const taken = new Set(criteria.map((criterion) => criterion.name));
  let number = 1;
  while (taken.has(`${kind}${String(number)}`)) number++;
  return `${kind}${String(number)}`;
}

export function removeCriterion(draft: ProblemDraft, part: number, index: number): ProblemDraft {
  return changePart(draft, part, { criteria: without(draft.parts[part]?.criteria ?? [], index) });
}

export function moveCriterion(draft: ProblemDraft, part: number, from: number, to: number): ProblemDraft {
  return changePart(draft, part, { criteria: moved(draft.parts[part]?.criteria ?? [], from, to) });
}
