import { Injectable, inject } from '@angular/core';
import { reviewRoutes, type CommentAnchor } from '@shared/review';
import { ApiClient, newIdempotencyKey } from './api-client';

/** Review of problems: comments, who is asked, sign-off. */
@Injectable({ providedIn: 'root' })
export class ReviewsApi {
  private readonly api = inject(ApiClient);

  review(problemId: string) {
    return this.api.call(reviewRoutes.review, { params: { problemId } });
  }

  colleagues(problemId: string) {
    return this.api.call(reviewRoutes.colleagues, { params: { problemId } });
  }

  comment(problemId: string, body: { anchor: CommentAnchor; text: string; wording?: string }) {
    const idempotencyKey = newIdempotencyKey();
    return this.api.call(reviewRoutes.comment, { params: { problemId }, body, idempotencyKey });
  }

  reply(problemId: string, commentId: string, text: string) {
    const idempotencyKey = newIdempotencyKey();
    return this.api.call(reviewRoutes.reply, { params: { problemId, commentId }, body: { text }, idempotencyKey });
  }

  settleComment(problemId: string, commentId: string, settled: boolean) {
    return this.api.call(reviewRoutes.settleComment, { params: { problemId, commentId }, body: { settled } });
  }

  acceptWording(problemId: string, version: number, commentId: string) {
    return this.api.call(reviewRoutes.acceptWording, { params: { problemId, commentId }, version });
  }

  askForReview(problemId: string, body: { colleagueIds: string[]; dueAt: number; note: string }) {
    return this.api.call(reviewRoutes.askForReview, { params: { problemId }, body });
  }

  decide(problemId: string, body: { revision: number; kind: 'signed off' | 'changes asked'; words: string }) {
    return this.api.call(reviewRoutes.decide, { params: { problemId }, body });
  }

  overrule(problemId: string, body: { revision: number; reason: string; courseId: string }) {
    return this.api.call(reviewRoutes.overrule, { params: { problemId }, body });
  }
}
