import { deskRoutes } from '@shared/desk';
import { membershipFor } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { presentDesk } from './desk-needs';

/** What needs somebody now. */
export function addDeskRoutes(serve: Serve, context: Context): void {
  const { db, clock } = context;

  serve(deskRoutes.desk, ({ user, params }) =>
    presentDesk(db, membershipFor(user, 'read a desk', params.courseId), clock.now()),
  );
}
