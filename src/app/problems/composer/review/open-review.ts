import { DestroyRef, Injectable, computed, inject, signal } from '@angular/core';
import { takeUntilDestroyed } from '@angular/core/rxjs-interop';
import { filter, firstValueFrom, merge } from 'rxjs';
import type { CommentAnchor, ProblemReview } from '@shared/review';
import { RequestFailure, sentenceOf } from '../../../core/api/request-failure';
import { ReviewsApi } from '../../../core/api/reviews-api';
import { LiveConnection } from '../../../core/live-connection';
import { OpenProblem } from '../open-problem';
import { notedLines, placeOfComment } from './comment-words';

/** What colleagues say about the problem that is open, kept up to date while others write. */
@Injectable()
export class OpenReview {
  private readonly api = inject(ReviewsApi);
  private readonly live = inject(LiveConnection);
  private readonly open = inject(OpenProblem);
  private readonly reviewSignal = signal<ProblemReview | null>(null);
  private readonly failureSignal = signal('');
  private readonly shownSignal = signal<string | null>(null);
  private problemId = '';
  private leave: () => void = () => undefined;
  private asked = 0;

  readonly review = this.reviewSignal.asReadonly();
  /** Why it could not be loaded. */
  readonly failure = this.failureSignal.asReadonly();
  /** The comment that is looked at. */
  readonly shownId = this.shownSignal.asReadonly();

  /** The comments with their places in the draft as it is typed: in the order of the lines, then of the parts. */
  readonly comments = computed(() => {
    const [review, draft] = [this.review(), this.open.draft()];
    if (!review || !draft) return [];
    return review.comments
      .map((comment) => ({ comment, place: placeOfComment(comment.anchor, review.statement, draft) }))
      .sort((a, b) => rank(a.place) - rank(b.place));
  });
  readonly unsettled = computed(() => this.comments().filter(({ comment }) => !comment.settled));
  readonly settled = computed(() => this.comments().filter(({ comment }) => comment.settled));
  readonly lines = computed(() => notedLines(this.comments(), this.shownId()));

  constructor() {
    merge(
      this.live.of('reviewChanged').pipe(filter(({ problemId }) => problemId === this.problemId)),
      this.live.rejoined,
    )
      .pipe(takeUntilDestroyed())
      .subscribe(() => void this.reload());
    inject(DestroyRef).onDestroy(() => {
      this.leave();
    });
  }

  /** Loads what was said about a problem, and watches it. */
  async load(problemId: string): Promise<void> {
    this.leave();
    this.problemId = problemId;
    this.reviewSignal.set(null);
    this.shownSignal.set(null);
    this.leave = this.live.watchProblem(problemId);
    await this.reload();
  }

  /** Asks the server again. */
  async reload(): Promise<void> {
    const turn = ++this.asked;
    try {
      const review = await firstValueFrom(this.api.review(this.problemId));
      if (turn !== this.asked) return;
      this.reviewSignal.set(review);
      this.failureSignal.set('');
    } catch (error) {
      if (!(error instanceof RequestFailure)) throw error;
      if (turn === this.asked) this.failureSignal.set(sentenceOf(error));
    }
  }

  /** Marks a comment as the one that is looked at. */
  show(commentId: string | null): void {
    this.shownSignal.set(commentId);
  }

  /** Shows the comment at a line, where there is one. */
  showLine(line: number): void {
    const found = this.unsettled().find(({ place }) => place.line === line);
    if (found) this.shownSignal.set(found.comment.id);
  }

  /** Writes a comment. What is typed in the draft is kept first, so that lines mean the same to all. */
  async comment(anchor: CommentAnchor, text: string, wording?: string): Promise<void> {
    await this.open.keep();
    const body = { anchor, text, ...(wording === undefined ? {} : { wording }) };
    const written = await firstValueFrom(this.api.comment(this.problemId, body));
    await this.reload();
    this.shownSignal.set(written.id);
  }

  async reply(commentId: string, text: string): Promise<void> {
    await firstValueFrom(this.api.reply(this.problemId, commentId, text));
    await this.reload();
  }

  async settle(commentId: string, settled: boolean): Promise<void> {
    await firstValueFrom(this.api.settleComment(this.problemId, commentId, settled));
    await this.reload();
  }

  /** Takes suggested wording into the draft. */
  async acceptWording(commentId: string): Promise<void> {
    await this.open.takeFrom((id, version) => firstValueFrom(this.api.acceptWording(id, version, commentId)));
    await this.reload();
  }

  async askForReview(colleagueIds: readonly string[], dueAt: number, note: string): Promise<void> {
    const body = { colleagueIds: [...colleagueIds], dueAt, note };
    this.reviewSignal.set(await firstValueFrom(this.api.askForReview(this.problemId, body)));
    // A draft becomes a problem in review by it.
    await this.open.refresh();
  }

  async decide(revision: number, kind: 'signed off' | 'changes asked', words: string): Promise<void> {
    this.reviewSignal.set(await firstValueFrom(this.api.decide(this.problemId, { revision, kind, words })));
  }

  async overrule(revision: number, reason: string, courseId: string): Promise<void> {
    this.reviewSignal.set(await firstValueFrom(this.api.overrule(this.problemId, { revision, reason, courseId })));
  }
}

function rank({ line, tab }: { readonly line: number | null; readonly tab: string | null }): number {
  if (line !== null) return line;
  return tab === null ? 0 : 100_000 + tab.charCodeAt(0);
}
