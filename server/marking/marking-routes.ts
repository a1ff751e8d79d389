import type { Queryable } from '@drizzle/client';
import { markingRoutes } from '@shared/marking';
import { can, membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { presentBenchAnswer } from './bench-answer';
import { markAnswer, returnAnswer, setAside, undoMark, type Deed, type Doer } from './bench-deeds';
import { findAnswer, findPile, marksAreGiven, teamOf } from './find-pile';
import { dropExpiredHolds, letGo, renewHolds, shortenHolds, takeHolds } from './holds';
import { listPiles, presentHeading } from './list-piles';
import { presentAnswers } from './present-answers';
import { recordLook } from '../record/record-look';
import { isReleasedTo } from '../results/find-set';
import { addPatternMarkRoutes } from './pattern-mark-routes';
import { addRulingRoutes } from './ruling-routes';
import { rulingsOf } from './rulings';
import { tellStage } from '../sets/enter-stage';
import { presentOn, tellDeed, tellHolds, tellPresence } from './tell-piles';
import { conflict } from '../http/errors';

/** Adds the routes of piles and benches. */
export function addMarkingRoutes(serve: Serve, context: Context): void {
  const { db, clock, live } = context;
  const write = <Result>(act: (tx: Queryable) => Result): Result => db.transaction(act, { behavior: 'immediate' });

  /** Acts at a bench in one transaction, then tells all who watch the pile. */
  function atBench(user: SignedIn, answerId: string, benchId: string, act: (tx: Queryable, doer: Doer) => Deed) {
    const { deed, set } = write((tx) => {
      const doer = doerAt(tx, user, findAnswer(tx, answerId).answer.pileId, benchId);
      return { deed: act(tx, doer), set: doer.found.set };
    });
    tellDeed(context, deed.pileId, deed);
    const { stage } = findPile(db, deed.pileId).set;
    if (stage !== set.stage) tellStage(context, set, stage);
    return deed.outcome;
  }

  serve(markingRoutes.piles, ({ user, params }) => {
    membershipFor(user, 'read piles', params.courseId);
    const items = listPiles(db, params.courseId, clock.now());
    return { items, total: items.length };
  });

  serve(markingRoutes.pile, ({ user, params }) => {
    const found = findPile(db, params.pileId);
    const { set } = found;
    const viewer = viewerIn(user, set.courseId);
    const { answers, patterns } = presentAnswers(db, viewer, params.pileId, clock.now());
    return {
      ...presentHeading(found),
      courseId: set.courseId,
      setId: set.id,
      setNumber: set.number,
      setTitle: set.title,
      stage: set.stage,
      open: marksAreGiven(set.stage),
      sequence: found.pile.sequence,
      criteria: found.part.criteria,
      patterns,
      answers,
      team: teamOf(db, set.courseId),
      present: presentOn(context, db, set.courseId, params.pileId),
      rulings: rulingsOf(db, params.pileId),
      me: viewer.membershipId,
      seesAllMarks: viewer.seesAllMarks,
    };
  });

  serve(markingRoutes.benchAnswer, ({ user, params }) => {
    const { answer, script } = findAnswer(db, params.answerId);
    const { set } = findPile(db, answer.pileId);
    const viewer = viewerIn(user, set.courseId);
    if (isReleasedTo(set, script)) recordLook(db, { set, script }, user, clock.now());
    return presentBenchAnswer(context, viewer, params.answerId);
  });

  serve(markingRoutes.take, ({ user, params, body }) => {
    const { held, change } = write((tx) => {
      const doer = doerAt(tx, user, params.pileId, body.benchId);
      if (!marksAreGiven(doer.found.set.stage)) throw conflict('This pile is not open for marking.');
      return takeHolds(tx, doer, body, clock.now());
    });
    tellHolds(context, change);
    return held;
  });

  serve(markingRoutes.renewHolds, ({ user, params, body }) =>
    write((tx) => renewHolds(tx, doerAt(tx, user, params.pileId, body.benchId), clock.now())),
  );

  serve(markingRoutes.letGo, ({ user, params, body }) => {
    tellHolds(
      context,
      write((tx) => letGo(tx, doerAt(tx, user, params.pileId, body.benchId))),
    );
    return {};
  });

  serve(markingRoutes.mark, ({ user, params, body, version, idempotencyKey }) =>
    atBench(user, params.answerId, body.benchId, (tx, doer) =>
      markAnswer(tx, doer, { ...params, version, idempotencyKey, now: clock.now() }, body),
    ),
  );

  serve(markingRoutes.undoMark, ({ user, params, body, version }) =>
    atBench(user, params.answerId, body.benchId, (tx, doer) =>
      undoMark(tx, doer, { ...params, version, now: clock.now() }, body.markId),
    ),
  );

  serve(markingRoutes.setAside, ({ user, params, body, version }) =>
    atBench(user, params.answerId, body.benchId, (tx, doer) =>
      setAside(tx, doer, { ...params, version, now: clock.now() }, body.reason, body.takeNext),
    ),
  );

  serve(markingRoutes.returnAnswer, ({ user, params, body, version }) =>
    atBench(user, params.answerId, body.benchId, (tx, doer) =>
      returnAnswer(tx, doer, { ...params, version, now: clock.now() }),
    ),
  );

  addRulingRoutes(serve, context);
  addPatternMarkRoutes(serve, context, doerAt);

  live.onBenchOpened((bench) => {
    tellPresence(context, bench.pileId);
  });
  live.onBenchLeft((bench, leaving) => {
    if (leaving === 'connection lost') write((tx) => shortenHolds(tx, bench, clock.now()));
    else
      tellHolds(
        context,
        write((tx) => letGo(tx, bench)),
      );
    tellPresence(context, bench.pileId);
  });
}

/** Gives up what has expired, and tells the benches; called again and again by the server. */
export function sweepHolds(context: Context): void {
  const { db, clock } = context;
  const changes = db.transaction((tx) => dropExpiredHolds(tx, clock.now()), { behavior: 'immediate' });
  for (const change of changes) tellHolds(context, change);
}

function viewerIn(user: SignedIn, courseId: string) {
  const { id } = membershipFor(user, 'read piles', courseId);
  return { membershipId: id, seesAllMarks: can(user, 'see all marks', courseId) };
}

/** Who acts at a bench. @throws RequestError 404, 403 */
export function doerAt(tx: Queryable, user: SignedIn, pileId: string, benchId: string): Doer {
  const found = findPile(tx, pileId);
  const { id } = membershipFor(user, 'mark', found.set.courseId);
  const seesAllMarks = can(user, 'see all marks', found.set.courseId);
  return { pileId, benchId, membershipId: id, userId: user.id, name: user.name, seesAllMarks, found };
}
