import { setsRoutes } from '@shared/sets';
import { demand, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { previewSheet } from '../scripts/preview-sheet';
import { checkClosedSet } from './close-set';
import { copySet } from './copy-set';
import { moveStage } from './move-stage';
import { previewStage } from './preview-stage';
import { countsOf, demandSet, listSets, presentSet } from './set-queries';
import { changeSet, createSet, listUsableProblems } from './set-rules';
import { listProgress } from './student-progress';

/** Adds the routes of sets: settings, problems, stages, and how far students are. */
export function addSetsRoutes(serve: Serve, context: Context): void {
  const { db, clock, log } = context;
  const deed = (user: SignedIn) => ({ userId: user.id, name: user.name, now: clock.now() });
  const courseOf = (setId: string) => demandSet(db, setId).set.courseId;

  serve(setsRoutes.sets, ({ user, params }) => {
    demand(user, 'read sets', params.courseId);
    const items = listSets(db, params.courseId);
    return { items, total: items.length };
  });

  serve(setsRoutes.createSet, ({ user, params, body }) => {
    demand(user, 'change sets', params.courseId);
    return createSet(db, params.courseId, body, deed(user));
  });

  serve(setsRoutes.set, ({ user, params }) => {
    demand(user, 'read sets', courseOf(params.setId));
    return presentSet(db, params.setId);
  });

  serve(setsRoutes.changeSet, ({ user, params, body, version }) => {
    demand(user, 'change sets', courseOf(params.setId));
    return changeSet(db, params.setId, version, body, deed(user));
  });

  serve(setsRoutes.copySet, ({ user, params, body }) => {
    demand(user, 'change sets', courseOf(params.setId));
    return copySet(db, params.setId, body.weeks, deed(user));
  });

  serve(setsRoutes.previewSheet, ({ user, params }) => {
    demand(user, 'preview sheets', courseOf(params.setId));
    return previewSheet(context, params.setId, params.membershipId);
  });

  serve(setsRoutes.usableProblems, ({ user, params, query }) => {
    demand(user, 'change sets', params.courseId);
    const items = listUsableProblems(db, params.courseId, user.id, query.search);
    return { items, total: items.length };
  });

  serve(setsRoutes.previewStage, ({ user, params }) => {
    demand(user, 'change sets', courseOf(params.setId));
    return previewStage(db, params.setId, params.stage, clock.now());
  });

  serve(setsRoutes.moveStage, async ({ user, params, body, version }) => {
    demand(user, 'change sets', courseOf(params.setId));
    await moveStage(context, params.setId, body.stage, { userId: user.id, name: user.name }, version);
    if (body.stage === 'closed') {
      // Nobody waits for a hundred scripts; what breaks off is taken up by the clock.
      void checkClosedSet(context, params.setId).catch((error: unknown) => {
        log.error({ setId: params.setId, error: String(error) }, 'checking a closed set broke off');
      });
    }
    return presentSet(db, params.setId);
  });

  serve(setsRoutes.progress, ({ user, params, query }) => {
    const { set } = demandSet(db, params.setId);
    demand(user, 'see all marks', set.courseId);
    return { ...listProgress(db, set, query), counts: countsOf(db, set) };
  });
}
