import { and, asc, count, eq, inArray, isNotNull } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, piles, sets } from '@drizzle/schema';
import type { SetPiles } from '@shared/marking';
import { setStageNames } from '@shared/primitives';
import { partMarks } from '@shared/problems';
import { pilesOfSet, teamOf, type FoundPile } from './find-pile';
import { activeHolds } from './holds';

/** Stages before a set has answers to mark. */
const withPiles = setStageNames.slice(setStageNames.indexOf('closed'), setStageNames.indexOf('archived'));

/** The sets of a course that have piles, the newest first, with how far each pile is marked. */
export function listPiles(tx: Queryable, courseId: string, now: number): SetPiles[] {
  const team = teamOf(tx, courseId);
  return tx
    .select()
    .from(sets)
    .where(and(eq(sets.courseId, courseId), inArray(sets.stage, withPiles)))
    .orderBy(asc(sets.number))
    .all()
    .reverse()
    .map((set) => {
      const counts = countStates(tx, set.id);
      return {
        setId: set.id,
        number: set.number,
        title: set.title,
        stage: set.stage,
        piles: pilesOfSet(tx, set.id).map((found) => {
          const number = (state: string) => counts.get(`${found.pile.id} ${state}`) ?? 0;
          const holders = new Set(
            activeHolds(tx, found.pile.id, now)
              .filter((hold) => hold.kind === 'in hand')
              .map((hold) => hold.membershipId),
          );
          return {
            ...presentHeading(found),
            total: number('waits') + number('marked') + number('set aside'),
            waiting: number('waits'),
            marked: number('marked'),
            setAside: number('set aside'),
            onIt: team.filter((each) => holders.has(each.membershipId)),
          };
        }),
      };
    });
}

/** What a pile is of, for headings. */
export function presentHeading(found: FoundPile) {
  return {
    id: found.pile.id,
    setProblemId: found.setProblem.id,
    position: found.setProblem.position,
    problemTitle: found.content.title,
    partLabel: found.partLabel,
    heading: found.part.heading,
    marks: partMarks(found.part),
  };
}

function countStates(tx: Queryable, setId: string): ReadonlyMap<string, number> {
  const rows = tx
    .select({ pileId: answers.pileId, state: answers.state, n: count() })
    .from(answers)
    .innerJoin(piles, eq(piles.id, answers.pileId))
    .where(and(eq(piles.setId, setId), isNotNull(answers.state)))
    .groupBy(answers.pileId, answers.state)
    .all();
  return new Map(rows.map((row) => [`${row.pileId} ${row.state ?? ''}`, row.n]));
}
