import { queriesRoutes } from '@shared/queries';
import { demand, membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { tellPileChanged } from '../marking/tell-piles';
import { recordLook } from '../record/record-look';
import { findSet } from '../results/find-set';
import { answerQuery } from './answer-query';
import { askQuery, presentOwnQueries } from './ask-query';
import { findQuery } from './find-queries';
import { listQueries, presentQuery } from './present-query';
import { changeClosing, changePolicy, policyOf, querySets } from './query-terms';

const pageSize = 50;

/** Adds the routes of mark queries: a student's own, and those that the team answers. */
export function addQueriesRoutes(serve: Serve, context: Context): void {
  const { db, clock, config } = context;

  function askerOn(user: SignedIn, setId: string) {
    const { id: membershipId } = membershipFor(user, 'query a mark', findSet(db, setId).set.courseId);
    return { userId: user.id, membershipId, setId, now: clock.now() };
  }

  /** Whoever may not know of a query learns no more than that of one that there is not. */
  function teamMember(user: SignedIn, queryId: string): string {
    return membershipFor(user, 'answer mark queries', findQuery(db, queryId).set.courseId).id;
  }

  serve(queriesRoutes.ownQueries, ({ user, params }) => presentOwnQueries(db, askerOn(user, params.setId)));

  serve(queriesRoutes.askQuery, ({ user, params, body, idempotencyKey }) => {
    const asker = askerOn(user, params.setId);
    db.transaction((tx) => askQuery(tx, asker, body, idempotencyKey), { behavior: 'immediate' });
    return presentOwnQueries(db, asker);
  });

  serve(queriesRoutes.queries, ({ user, params, query }) => {
    const { id } = membershipFor(user, 'answer mark queries', params.courseId);
    const all = listQueries(db, params.courseId, id);
    return {
      items: all.slice((query.page - 1) * pageSize, query.page * pageSize),
      total: all.length,
      waiting: all.filter(({ outcome, notYours }) => outcome === null && notYours === null).length,
      policy: policyOf(db, params.courseId),
      sets: querySets(db, params.courseId),
    };
  });

  serve(queriesRoutes.query, ({ user, params }) => {
    const membershipId = teamMember(user, params.queryId);
    recordLook(db, findQuery(db, params.queryId), user, clock.now());
    return presentQuery(db, params.queryId, membershipId);
  });

  serve(queriesRoutes.answerQuery, ({ user, params, body, version, idempotencyKey }) => {
    const membershipId = teamMember(user, params.queryId);
    const by = { user, membershipId, version, idempotencyKey, origin: config.origin, now: clock.now() };
    const changed = db.transaction((tx) => answerQuery(tx, params.queryId, body, by), { behavior: 'immediate' });
    if (changed) tellPileChanged(context, changed.pileId, changed.sequence);
    return presentQuery(db, params.queryId, membershipId);
  });

  serve(queriesRoutes.changeClosing, ({ user, params, body, version }) => {
    demand(user, 'set terms of mark queries', findSet(db, params.setId).set.courseId);
    const by = { user, version, now: clock.now() };
    return db.transaction((tx) => changeClosing(tx, params.setId, body.closesAt, by), { behavior: 'immediate' });
  });

  serve(queriesRoutes.changePolicy, ({ user, params, body }) => {
    demand(user, 'set terms of mark queries', params.courseId);
    db.transaction((tx) => changePolicy(tx, params.courseId, body.policy, user, clock.now()), {
      behavior: 'immediate',
    });
    return { policy: policyOf(db, params.courseId) };
  });
}
