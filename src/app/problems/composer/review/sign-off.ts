import { ChangeDetectionStrategy, Component, computed, inject, input, output, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { momentOf } from '@shared/times';
import { sentenceOf } from '../../../core/api/request-failure';
import { Session } from '../../../core/session';
import { OpenProblem } from '../open-problem';
import { TypedField } from '../typed-field';
import { AskForReview } from './ask-for-review';
import { OpenReview } from './open-review';

/** Decisions that need words before they are made. */
type Wording = 'changes asked' | 'overruled';

/** Whether the latest revision is signed off; who is waited for; signing off, asking for changes, overruling. */
@Component({
  selector: 'app-sign-off',
  imports: [AskForReview, MatButtonModule, TypedField],
  templateUrl: './sign-off.html',
  styleUrls: ['./review-form.scss', './sign-off.scss'],
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class SignOff {
  private readonly session = inject(Session);
  private readonly open = inject(OpenProblem);
  protected readonly review = inject(OpenReview);

  readonly problemId = input.required<string>();
  readonly courseId = input.required<string>();
  /** What changed since a revision is asked for. */
  readonly compare = output<number>();

  protected readonly isAsking = signal(false);
  protected readonly wording = signal<Wording | null>(null);
  protected readonly words = signal('');
  protected readonly fault = signal('');
  protected readonly failure = signal('');
  protected readonly isBusy = signal(false);

  protected readonly revision = computed(() => this.open.detail()?.latestRevision?.number ?? null);
  protected readonly isLead = computed(() => this.session.role() === 'lead');
  protected readonly isRetired = computed(() => this.open.detail()?.status === 'retired');
  protected readonly waited = computed(() => this.review.review()?.requests.filter((each) => !each.answeredAt) ?? []);
  protected readonly mayUse = computed(() =>
    ['signed off', 'overruled'].includes(this.review.review()?.standing.state ?? ''),
  );
  /** The revision that was signed off last, where something is newer than it. */
  protected readonly since = computed(() => {
    const last = this.review.review()?.standing.lastRevision ?? null;
    return last !== null && (last !== this.revision() || this.open.detail()?.changed === true) ? last : null;
  });

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected begin(wording: Wording): void {
    this.words.set('');
    this.fault.set('');
    this.wording.set(wording);
  }

  protected signOff(): Promise<void> {
    return this.attempt((revision) => this.review.decide(revision, 'signed off', ''));
  }

  protected async decideWithWords(event: Event): Promise<void> {
    event.preventDefault();
    const [wording, words] = [this.wording(), this.words().trim()];
    this.fault.set(words !== '' ? '' : wording === 'overruled' ? 'Give the reason.' : 'Say what should change.');
    if (words === '') return;
    await this.attempt(async (revision) => {
      if (wording === 'overruled') await this.review.overrule(revision, words, this.courseId());
      else await this.review.decide(revision, 'changes asked', words);
      this.wording.set(null);
    });
  }

  private async attempt(deed: (revision: number) => Promise<void>): Promise<void> {
    const revision = this.revision();
    if (this.isBusy() || revision === null) return;
    this.isBusy.set(true);
    this.failure.set('');
    try {
      await deed(revision);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    } finally {
      this.isBusy.set(false);
    }
  }
}
