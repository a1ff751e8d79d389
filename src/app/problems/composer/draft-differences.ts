import type { ProblemDraft } from '@shared/problem-draft';
import { partLabel } from '@shared/problems';

/** One place where two drafts differ. */
export interface Difference {
  /** In words, for example `(b) key`. */
  readonly place: string;
  readonly mine: string;
  readonly theirs: string;
}

/** Where two drafts differ, in the order of the page. */
export function draftDifferences(mine: ProblemDraft, theirs: ProblemDraft): readonly Difference[] {
  const [one, other] = [leaves(mine), leaves(theirs)];
  return [...new Set([...one.keys(), ...other.keys()])]
    .filter((place) => one.get(place) !== other.get(place))
    .map((place) => ({ place, mine: one.get(place) ?? '', theirs: other.get(place) ?? '' }));
}

function leaves(draft: ProblemDraft): ReadonlyMap<string, string> {
  const found = new Map<string, string>([
    ['title', draft.title],
    ['statement', draft.statement],
    ['tags', draft.tags],
    ['safety line', draft.safety],
  ]);
  for (const [index, given] of draft.givens.entries())
    collect(found, `given ${given.name || String(index + 1)}`, given);
  for (const [index, { answer, criteria, ...part }] of draft.parts.entries()) {
    const place = `(${partLabel(index)})`;
    collect(found, place, { ...part, ...answer });
    for (const criterion of criteria) collect(found, `${place} ${criterion.name}`, criterion);
  }
  return found;
}

function collect(found: Map<string, string>, place: string, value: unknown): void {
  if (typeof value !== 'object' || value === null) {
    found.set(place, String(value));
    return;
  }
  for (const [name, each] of Object.entries(value)) {
    if (name === 'id') continue;
    const step = Number.isNaN(Number(name)) ? words(name) : String(Number(name) + 1);
    collect(found, `${place} ${step}`, each);
  }
}

/** `workedPage` as words. */
function words(name: string): string {
  return name.replace(/([A-Z])/g, (letter) => ` ${letter.toLowerCase()}`);
}
