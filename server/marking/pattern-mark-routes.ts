import type { Queryable } from '@drizzle/client';
import { patternMarkRoutes } from '@shared/pattern-marks';
import { membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { tellStage } from '../sets/enter-stage';
import type { Doer } from './bench-deeds';
import { findAnswer, findPile } from './find-pile';
import { applyToPattern, findApplication, undoApplication } from './pattern-marks';
import { reachOf } from './pattern-reach';
import { tellPileChanged, tellPresence } from './tell-piles';

type DoerAt = (tx: Queryable, user: SignedIn, pileId: string, benchId: string) => Doer;

/** Adds the routes by which a mark is applied to a pattern and taken back. */
export function addPatternMarkRoutes(serve: Serve, context: Context, doerAt: DoerAt): void {
  const { db, clock } = context;

  /** Acts in one transaction; then every bench of the pile fetches it again, since many answers changed at once. */
  function act<Outcome extends { readonly sequence: number }>(
    pileId: string,
    deed: (tx: Queryable) => { readonly outcome: Outcome; readonly isNew: boolean },
  ): Outcome {
    const { set } = findPile(db, pileId);
    const { outcome, isNew } = db.transaction(deed, { behavior: 'immediate' });
    if (isNew) {
      tellPileChanged(context, pileId, outcome.sequence);
      tellPresence(context, pileId);
      const { stage } = findPile(db, pileId).set;
      if (stage !== set.stage) tellStage(context, set, stage);
    }
    return outcome;
  }

  serve(patternMarkRoutes.preview, ({ user, params }) => {
    const found = findPile(db, findAnswer(db, params.answerId).answer.pileId);
    const { id } = membershipFor(user, 'mark', found.set.courseId);
    const { name, refused, marks, needPerson, openCriteria, held } = reachOf(
      db,
      found,
      params.answerId,
      id,
      clock.now(),
    );
    return { name, refused, marks, needPerson, openCriteria, held };
  });

  serve(patternMarkRoutes.apply, ({ user, params, body, idempotencyKey }) => {
    const { pileId } = findAnswer(db, params.answerId).answer;
    const { answerId } = params;
    return act(pileId, (tx) =>
      applyToPattern(
        tx,
        doerAt(tx, user, pileId, body.benchId),
        { answerId, criteria: body.criteria, remark: body.remark, answers: body.answers, idempotencyKey },
        clock.now(),
      ),
    );
  });

  serve(patternMarkRoutes.undo, ({ user, params, body }) => {
    const { pileId } = findApplication(db, params.applicationId);
    return act(pileId, (tx) =>
      undoApplication(tx, doerAt(tx, user, pileId, body.benchId), params.applicationId, clock.now()),
    );
  });
}
