import type { Complex } from '@shared/reading/complex';
import type { Reading } from '@shared/reading/reading';
import type { DifferingPoint } from './match';
import type { PossibleRelation } from './possible-relations';
import type { Relation } from './relation';

/** How an answer stands to its key. */
export type Verdict = 'right' | 'unit' | 'follow-through' | 'slip' | 'wrong' | 'unreadable' | 'unanswered';

/** How the server judged an answer: a proposal, with what a marker needs to see why. */
export interface Check {
  readonly verdict: Verdict;
  /** Fraction of the part's marks. */
  readonly fraction: number;
  readonly readAs: string;
  /** Why it could not be read, or why it is wrong where that is more than a value. */
  readonly problem?: string;
  /** Index of the slip that it equals. */
  readonly slip?: number;
  readonly relation: Relation;
  /** Of a wrong answer: all relations that it may stand in, for telling patterns of many answers. */
  readonly possible?: readonly PossibleRelation[];
  /** The answer's value as compared, in the part's unit; null where there is none. */
  readonly value: Complex | readonly Complex[] | null;
  /** The key's value as compared. */
  readonly keyValue: Complex | readonly Complex[] | null;
  /** Where a formula differs from its key. */
  readonly point?: DifferingPoint;
  readonly reading: Reading;
}
