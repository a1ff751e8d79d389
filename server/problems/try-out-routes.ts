import { tryOutRoutes as routes } from '@shared/try-outs';
import type { SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { problemRoom } from '../live/rooms';
import { demandReader } from './review-rules';
import { beginTryOut, handInTryOut, keepTryOut, listTryOuts } from './try-out-rules';

/** Try-outs: colleagues solve a problem before students do. */
export function addTryOutRoutes(serve: Serve, context: Context): void {
  const { db, clock, live } = context;
  const deed = (user: SignedIn) => ({ personId: user.id, now: clock.now() });

  serve(routes.tryOuts, ({ user, params: { problemId } }) => {
    demandReader(db, user, problemId);
    const items = listTryOuts(db, problemId);
    return { items, total: items.length };
  });

  serve(routes.beginTryOut, ({ user, params: { problemId } }) => {
    demandReader(db, user, problemId);
    return beginTryOut(context, problemId, deed(user));
  });

  serve(routes.keepTryOut, ({ user, params: { problemId, tryOutId }, body }) => {
    demandReader(db, user, problemId);
    keepTryOut(db, problemId, tryOutId, body, deed(user));
    return {};
  });

  serve(routes.handInTryOut, async ({ user, params: { problemId, tryOutId }, body }) => {
    demandReader(db, user, problemId);
    const made = await handInTryOut(context, problemId, tryOutId, body, deed(user));
    live.emit([problemRoom(problemId)], 'reviewChanged', { problemId });
    return made;
  });
}
