import type { Queryable } from '@drizzle/client';
import { correctionRoutes as routes } from '@shared/corrections';
import { demand, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { workJobs } from '../jobs/work-jobs';
import { revisionNumber } from '../problems/problem-queries';
import { findPile } from '../marking/find-pile';
import {
  confirmCorrection,
  letMarkStand,
  proposeCorrection,
  slipOfPattern,
  withdrawCorrection,
} from './correction-rules';
import { demandCorrection, listChanges, listCorrections, presentCorrection } from './present-correction';

/** Corrections of what was answered: for leads of the course. */
export function addCorrectionRoutes(serve: Serve, context: Context): void {
  const { db, keys, clock } = context;
  const write = <Result>(act: (tx: Queryable) => Result): Result => db.transaction(act, { behavior: 'immediate' });
  const corrector = (user: SignedIn) => ({ userId: user.id, now: clock.now() });
  const pileFor = (user: SignedIn, pileId: string) => {
    const found = findPile(db, pileId);
    demand(user, 'correct keys', found.set.courseId);
    return found;
  };
  const correctionFor = (tx: Queryable, user: SignedIn, correctionId: string) => {
    const row = demandCorrection(tx, correctionId);
    demand(user, 'correct keys', row.courseId);
    return row;
  };

  serve(routes.correctablePart, ({ user, params, query }) => {
    const found = pileFor(user, params.pileId);
    const { set, setProblem, part, partLabel, content } = found;
    return {
      courseId: set.courseId,
      pileId: params.pileId,
      place: `Set ${String(set.number)}, ${String(setProblem.position)} (${partLabel})`,
      problemTitle: content.title,
      revision: revisionNumber(db, setProblem.revisionId),
      heading: part.heading,
      answer: part.answer,
      criteria: part.criteria,
      ...slipOfPattern(db, found, query.pattern),
      corrections: listCorrections(db, setProblem.revisionId, part.id, set.courseId),
    };
  });

  serve(routes.proposeCorrection, async ({ user, params, body, idempotencyKey }) => {
    const found = pileFor(user, params.pileId);
    const row = await proposeCorrection(db, keys, found, { ...body, idempotencyKey }, corrector(user));
    void workJobs(context);
    return presentCorrection(db, row);
  });

  serve(routes.correction, ({ user, params }) => presentCorrection(db, correctionFor(db, user, params.correctionId)));

  serve(routes.correctionChanges, ({ user, params, query }) =>
    listChanges(db, correctionFor(db, user, params.correctionId), query.page),
  );

  serve(routes.confirmCorrection, ({ user, params, version }) => {
    const row = write((tx) => {
      correctionFor(tx, user, params.correctionId);
      return confirmCorrection(tx, params.correctionId, version, corrector(user));
    });
    void workJobs(context);
    return presentCorrection(db, row);
  });

  serve(routes.withdrawCorrection, ({ user, params, version }) =>
    write((tx) => {
      correctionFor(tx, user, params.correctionId);
      return presentCorrection(tx, withdrawCorrection(tx, params.correctionId, version, corrector(user)));
    }),
  );

  serve(routes.markStands, ({ user, params }) => {
    write((tx) => {
      letMarkStand(tx, correctionFor(tx, user, params.correctionId), params.answerId, corrector(user));
    });
    return {};
  });
}
