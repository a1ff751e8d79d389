import type { Queryable } from '@drizzle/client';
import { rulingRoutes } from '@shared/rulings';
import { membershipFor, type Action, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { pileMarksRoom, pileRoom } from '../live/rooms';
import { findPile } from './find-pile';
import { askRuling, decideRuling, findRuling, waitOnRuling, type RulingDeed, type RulingDoer } from './rulings';

/** Adds the routes by which markers ask for rulings and leads decide them. */
export function addRulingRoutes(serve: Serve, context: Context): void {
  const { db, clock, live } = context;

  function doerOn(tx: Queryable, user: SignedIn, action: Action, pileId: string): RulingDoer {
    const found = findPile(tx, pileId);
    const { id: membershipId } = membershipFor(user, action, found.set.courseId);
    return { userId: user.id, membershipId, found, now: clock.now() };
  }

  /** Acts in one transaction, then tells every bench of the pile. */
  function act(pileIn: (tx: Queryable) => string, deedIn: (tx: Queryable, pileId: string) => RulingDeed) {
    const { pileId, deed } = db.transaction(
      (tx) => {
        const id = pileIn(tx);
        return { pileId: id, deed: deedIn(tx, id) };
      },
      { behavior: 'immediate' },
    );
    const { event, outcome } = deed;
    if (event) live.emit([pileRoom(pileId), pileMarksRoom(pileId)], event, { pileId, ...outcome });
    return outcome;
  }

  serve(rulingRoutes.ask, ({ user, params, body, idempotencyKey }) =>
    act(
      () => params.pileId,
      (tx, pileId) => askRuling(tx, doerOn(tx, user, 'mark', pileId), { ...body, idempotencyKey }),
    ),
  );

  serve(rulingRoutes.wait, ({ user, params, body }) =>
    act(
      (tx) => findRuling(tx, params.rulingId).pileId,
      (tx, pileId) =>
        waitOnRuling(tx, doerOn(tx, user, 'mark', pileId), findRuling(tx, params.rulingId), body.answerId),
    ),
  );

  serve(rulingRoutes.decide, ({ user, params, body }) =>
    act(
      (tx) => findRuling(tx, params.rulingId).pileId,
      (tx, pileId) =>
        decideRuling(tx, doerOn(tx, user, 'decide rulings', pileId), findRuling(tx, params.rulingId), body.decision),
    ),
  );
}
