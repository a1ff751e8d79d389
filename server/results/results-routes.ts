import type { Queryable } from '@drizzle/client';
import { resultsRoutes } from '@shared/results';
import { demand, membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { studentsRoom, teamRoom } from '../live/rooms';
import { enter } from '../record/enter';
import { listFeedback, presentFeedback } from './feedback';
import { findSet } from './find-set';
import { presentRelease, releaseSet, takeBackRelease, type Releaser } from './release-set';
import { listResults, resultsAsCsv, setResults } from './set-results';

/** Adds the routes of results, release and feedback. */
export function addResultsRoutes(serve: Serve, context: Context): void {
  const { db, clock, config, live } = context;
  const releaserOf = (user: SignedIn): Releaser => ({
    userId: user.id,
    name: user.name,
    origin: config.origin,
    now: clock.now(),
  });

  /** Acts in one transaction, then tells the course which stage the set is in. */
  function change(user: SignedIn, setId: string, act: (tx: Queryable, releaser: Releaser) => void) {
    demand(user, 'release', findSet(db, setId).set.courseId);
    const releaser = releaserOf(user);
    db.transaction((tx) => act(tx, releaser), { behavior: 'immediate' });
    const { courseId, stage } = findSet(db, setId).set;
    live.emit([teamRoom(courseId), studentsRoom(courseId)], 'stageChanged', { courseId, setId, stage });
    return presentRelease(db, setId, releaser);
  }

  serve(resultsRoutes.resultsList, ({ user, params }) => {
    demand(user, 'see all marks', params.courseId);
    const items = listResults(db, params.courseId);
    return { items, total: items.length };
  });

  serve(resultsRoutes.results, ({ user, params }) => {
    demand(user, 'see all marks', findSet(db, params.setId).set.courseId);
    return setResults(db, params.setId);
  });

  serve(resultsRoutes.resultsCsv, ({ user, params, response }) => {
    const { set } = findSet(db, params.setId);
    demand(user, 'see all marks', set.courseId);
    const csv = resultsAsCsv(setResults(db, params.setId));
    enter(db, {
      at: clock.now(),
      actorId: user.id,
      courseId: set.courseId,
      action: 'results exported',
      thing: 'set',
      thingId: set.id,
      sentence: `${user.name} exported the results of set ${String(set.number)}.`,
    });
    response
      .attachment(`set-${String(set.number)}-results.csv`)
      .type('text/csv')
      .send(csv);
    return csv;
  });

  serve(resultsRoutes.release, ({ user, params }) => {
    demand(user, 'release', findSet(db, params.setId).set.courseId);
    return presentRelease(db, params.setId, releaserOf(user));
  });

  serve(resultsRoutes.releaseSet, ({ user, params, body, version }) =>
    change(user, params.setId, (tx, releaser) => {
      releaseSet(tx, params.setId, version, body, releaser);
    }),
  );

  serve(resultsRoutes.takeBackRelease, ({ user, params, version }) =>
    change(user, params.setId, (tx, releaser) => {
      takeBackRelease(tx, params.setId, version, releaser);
    }),
  );

  serve(resultsRoutes.feedbackList, ({ user, params }) => {
    const { id } = membershipFor(user, 'answer a sheet', params.courseId);
    const items = listFeedback(db, params.courseId, id);
    return { items, total: items.length };
  });

  serve(resultsRoutes.feedback, ({ user, params }) => {
    const { id } = membershipFor(user, 'answer a sheet', findSet(db, params.setId).set.courseId);
    return presentFeedback(db, params.setId, id, clock.now());
  });
}
