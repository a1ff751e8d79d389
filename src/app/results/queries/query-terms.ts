import { ChangeDetectionStrategy, Component, inject, input, output, signal } from '@angular/core';
import { MatButtonModule } from '@angular/material/button';
import { MatRadioModule } from '@angular/material/radio';
import { firstValueFrom, type Observable } from 'rxjs';
import type { QuerySet } from '@shared/queries';
import { queryPolicies, queryPolicyWords, type QueryPolicy } from '@shared/query-policy';
import { instantAt, momentOf, wallClockOf } from '@shared/times';
import { QueriesApi } from '../../core/api/queries-api';
import { sentenceOf } from '../../core/api/request-failure';
import { Session } from '../../core/session';

/** What a lead says of queries: what one can do to a mark, and until when the marks of each set can be queried. */
@Component({
  selector: 'app-query-terms',
  imports: [MatButtonModule, MatRadioModule],
  templateUrl: './query-terms.html',
  styleUrl: './query-terms.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export class QueryTerms {
  private readonly api = inject(QueriesApi);
  private readonly session = inject(Session);

  readonly courseId = input.required<string>();
  readonly policy = input.required<QueryPolicy>();
  readonly sets = input.required<readonly QuerySet[]>();
  /** Something was changed on the server. */
  readonly changed = output();

  protected readonly policies = queryPolicies;
  protected readonly words = queryPolicyWords;
  protected readonly failure = signal('');
  protected readonly done = signal('');

  protected moment(at: number): string {
    return momentOf(at, this.zone());
  }

  protected wallClock({ closesAt }: QuerySet): string {
    return wallClockOf(closesAt, this.zone());
  }

  protected choosePolicy(policy: QueryPolicy): Promise<void> {
    return this.act(this.api.changePolicy(this.courseId(), policy), 'Students are told so from the next query on.');
  }

  protected chooseClosing(set: QuerySet, wallClock: string): Promise<void> {
    const closesAt = instantAt(wallClock, this.zone());
    if (Number.isNaN(closesAt)) {
      this.failure.set('This is no time; give a day and a time of day.');
      return Promise.resolve();
    }
    const said = `The marks of Set ${String(set.number)} can be queried until ${this.moment(closesAt)}.`;
    return this.act(this.api.changeClosing(set.setId, set.version, closesAt), said);
  }

  protected usualClosing(set: QuerySet): Promise<void> {
    const said = `The marks of Set ${String(set.number)} can be queried for fourteen days after release.`;
    return this.act(this.api.changeClosing(set.setId, set.version, null), said);
  }

  private async act(change: Observable<unknown>, said: string): Promise<void> {
    this.failure.set('');
    this.done.set('');
    try {
      await firstValueFrom(change);
      this.done.set(said);
    } catch (error) {
      this.failure.set(sentenceOf(error));
    }
    this.changed.emit();
  }

  private zone(): string {
    return this.session.course()?.timeZone ?? 'UTC';
  }
}
