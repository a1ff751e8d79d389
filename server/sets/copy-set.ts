import type { Database } from '@drizzle/client';
import { setProblems, sets, setStages } from '@drizzle/schema';
import { movedByWeeks } from '@shared/times';
import type { SetDetail } from '@shared/sets';
import { newId } from '../http/new-id';
import { enter } from '../record/enter';
import { demandSet, nextSetNumber, presentSet, problemsOfSet } from './set-queries';
import { entryFor, type Deed } from './set-rules';

/**
 * Begins a draft with the settings and problems of a set, its dates moved by whole weeks: the same weekdays and, by the
 * clock of its course, the same times of day. Students, allowances and answers stay where they are, and numbers are drawn
 * anew.
 *
 * @throws RequestError 404
 */
export function copySet(db: Database, setId: string, weeks: number, deed: Deed): SetDetail {
  return db.transaction(
    (tx) => {
      const { set, course } = demandSet(tx, setId);
      const moved = <At extends number | null>(at: At) =>
        at === null ? null : movedByWeeks(at, weeks, course.timeZone);
      const id = newId();
      const number = nextSetNumber(tx, set.courseId);
      const { courseId, title, coverText, individualVariants, showKeys } = set;
      const lateRule = set.lateRule && {
        ...set.lateRule,
        until: movedByWeeks(set.lateRule.until, weeks, course.timeZone),
      };
      tx.insert(sets)
        .values({
          id,
          number,
          courseId,
          title,
          coverText,
          individualVariants,
          showKeys,
          lateRule,
          opensAt: moved(set.opensAt),
          closesAt: moved(set.closesAt),
          seed: newId(),
          createdAt: deed.now,
        })
        .run();
      tx.insert(setStages).values({ id: newId(), setId: id, stage: 'draft', at: deed.now, byId: deed.userId }).run();
      for (const { setProblem } of problemsOfSet(tx, setId))
        tx.insert(setProblems)
          .values({ ...setProblem, id: newId(), setId: id })
          .run();
      enter(tx, {
        ...entryFor({ id, courseId }, deed, 'set begun'),
        sentence: `${deed.name} began set ${String(number)}, “${title}”, as a copy of set ${String(set.number)}.`,
      });
      return presentSet(tx, id);
    },
    { behavior: 'immediate' },
  );
}
