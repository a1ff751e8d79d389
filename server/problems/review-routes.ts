import { reviewRoutes as routes } from '@shared/review';
import { can, demand, membershipFor, type SignedIn } from '../access/policy';
import type { Context } from '../context';
import type { Serve } from '../http/serve';
import { problemRoom } from '../live/rooms';
import { demandProblem } from './problem-rules';
import { acceptWording, replyTo, settleComment, writeComment } from './review-comments';
import { askForReview, decide, demandReader, overrule, presentReview, reviewersFor } from './review-rules';

/** Review of problems: comments, who is asked, sign-off. */
export function addReviewRoutes(serve: Serve, context: Context): void {
  const { db, clock, live } = context;
  const deed = (user: SignedIn) => ({ personId: user.id, now: clock.now() });
  const tell = (problemId: string) => {
    live.emit([problemRoom(problemId)], 'reviewChanged', { problemId });
  };

  serve(routes.review, ({ user, params: { problemId } }) => {
    demandReader(db, user, problemId);
    return presentReview(db, problemId, user.id);
  });

  serve(routes.colleagues, ({ user, params: { problemId } }) => {
    demand(user, 'write problems');
    demandProblem(db, problemId, user.id);
    const items = reviewersFor(db, problemId, user);
    return { items, total: items.length };
  });

  serve(routes.comment, ({ user, params: { problemId }, body, idempotencyKey }) => {
    const problem = demandReader(db, user, problemId);
    const written = writeComment(db, problem, body, idempotencyKey, deed(user));
    tell(problemId);
    return written;
  });

  serve(routes.reply, ({ user, params: { problemId, commentId }, body, idempotencyKey }) => {
    demandReader(db, user, problemId);
    const written = replyTo(db, problemId, commentId, { ...body, idempotencyKey }, deed(user));
    tell(problemId);
    return written;
  });

  serve(routes.settleComment, ({ user, params: { problemId, commentId }, body }) => {
    demandReader(db, user, problemId);
    const mayWrite = can(user, 'write problems');
    const comment = settleComment(db, problemId, commentId, body.settled, mayWrite, deed(user));
    tell(problemId);
    return comment;
  });

  serve(routes.acceptWording, ({ user, params: { problemId, commentId }, version }) => {
    demand(user, 'write problems');
    const problem = acceptWording(db, problemId, commentId, version, deed(user));
    tell(problemId);
    return problem;
  });

  serve(routes.askForReview, ({ user, params: { problemId }, body }) => {
    demand(user, 'write problems');
    askForReview(db, problemId, body, user, clock.now());
    tell(problemId);
    return presentReview(db, problemId, user.id);
  });

  serve(routes.decide, ({ user, params: { problemId }, body }) => {
    demandReader(db, user, problemId);
    decide(db, problemId, body, deed(user));
    tell(problemId);
    return presentReview(db, problemId, user.id);
  });

  serve(routes.overrule, ({ user, params: { problemId }, body }) => {
    membershipFor(user, 'overrule reviews', body.courseId);
    demandProblem(db, problemId, user.id);
    overrule(db, problemId, body, deed(user));
    tell(problemId);
    return presentReview(db, problemId, user.id);
  });
}
