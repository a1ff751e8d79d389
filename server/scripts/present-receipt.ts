import { and, desc, eq, inArray } from 'drizzle-orm';
import type { Queryable } from '@drizzle/client';
import { answers, pages, submissions } from '@drizzle/schema';
import { partLabel } from '@shared/problems';
import type { Receipt } from '@shared/scripts';
import { notFound } from '../http/errors';
import { receiptOf } from '../receipts/receipt-of';
import { demandSet, problemsOfSet } from '../sets/set-queries';
import type { ScriptRow } from './begin-script';
import { hasChanged, presentSubmission, sheetStateOf } from './present-sheet';
import { ownTimes } from './own-times';
import { savedParts } from './saved-answers';

/** Proof of what a script handed in, and when. @throws RequestError 404 where nothing was handed in */
export function presentReceipt(tx: Queryable, script: ScriptRow, now: number): Receipt {
  const { set, course } = demandSet(tx, script.setId);
  const [last, ...earlier] = tx
    .select()
    .from(submissions)
    .where(eq(submissions.scriptId, script.id))
    .orderBy(desc(submissions.number))
    .all();
  if (!last) throw notFound('receipt');
  const times = ownTimes(tx, set, script.membershipId, now);
  const sizes = pageSizes(
    tx,
    script.id,
    last.content.flatMap((part) => part.pages.map((page) => page.id)),
  );
  const places = new Map(
    problemsOfSet(tx, set.id).flatMap(({ setProblem, revision }) =>
      revision.content.parts.map((part, index) => [
        `${setProblem.id} ${part.id}`,
        { position: setProblem.position, problemTitle: revision.content.title, label: partLabel(index) },
      ]),
    ),
  );
  return {
    setId: set.id,
    courseId: course.id,
    courseTitle: course.title,
    number: set.number,
    title: set.title,
    timeZone: course.timeZone,
    code: script.code,
    submission: presentSubmission(last),
    earlier: earlier.map(presentSubmission),
    signed: receiptOf(script, last),
    parts: last.content.flatMap(({ setProblemId, partId, text, pages: own }) => {
      const place = places.get(`${setProblemId} ${partId}`);
      if (!place) return [];
      return [
        {
          ...place,
          text,
          pages: own.map(({ id, sha256 }) => ({ id, sha256, bytes: sizes.get(id) ?? 0, path: `/pages/${id}` })),
        },
      ];
    }),
    content: [...last.content],
    state: sheetStateOf(set, script, times),
    closesAt: times.dueAt,
    changedSince: hasChanged(last, savedParts(tx, script)),
  };
}

function pageSizes(tx: Queryable, scriptId: string, ids: readonly string[]): ReadonlyMap<string, number> {
  if (ids.length === 0) return new Map();
  const rows = tx
    .select({ id: pages.id, bytes: pages.bytes })
    .from(pages)
    .innerJoin(answers, eq(answers.id, pages.answerId))
    .where(and(eq(answers.scriptId, scriptId), inArray(pages.id, [...ids])))
    .all();
  return new Map(rows.map((row) => [row.id, row.bytes]));
}
