import { ChangeDetectionStrategy, Component, computed, effect, inject, input, signal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { MatIconModule } from '@angular/material/icon';
import type { OwnQueries, OwnQuery } from '@shared/queries';
import { queryPolicyWords } from '@shared/query-policy';
import type { FeedbackPart as Part } from '@shared/results';
import { dayOf, momentOf, spanOf } from '@shared/times';
import { QueriesApi } from '../../core/api/queries-api';
import { ResultsApi } from '../../core/api/results-api';
import { RequestFailure, sentenceOf } from '../../core/api/request-failure';
import { Now } from '../../core/now';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { Typesetter } from '../../ui/formula-text/typesetter';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { FeedbackPart } from './feedback-part';
import { PartQueries, type QueriedMark } from './part-queries';
import { givensAsFormula, givensByName } from './printed-givens';

/** A student's marks and feedback on one set, each beside their own work. */
@Component({
  selector: 'app-feedback',
  imports: [ErrorState, FeedbackPart, FormulaText, LoadingBars, MatButtonModule, MatIconModule, PartQueries],
  templateUrl: './feedback.html',
  styleUrl: './feedback.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class FeedbackPage {
  private readonly api = inject(ResultsApi);
  private readonly queriesApi = inject(QueriesApi);
  private readonly clock = inject(Now);
  private readonly session = inject(Session);
  private readonly pageTitle = inject(PageTitle);
  protected readonly typesetter = inject(Typesetter);

  readonly setId = input.required<string>();

  protected readonly feedback = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.api.feedback(params),
  });
  protected readonly problem = computed(() => {
    const error = this.feedback.error();
    if (!error) return null;
    const notYet = error instanceof RequestFailure && error.details.status === 404;
    return notYet ? 'There is no feedback here: the marks of this set are not released to you.' : sentenceOf(error);
  });
  private readonly timeZone = computed(() => this.session.course()?.timeZone ?? 'UTC');
  protected readonly problems = computed(() =>
    this.feedback.hasValue()
      ? this.feedback.value().problems.map((each) => ({
          ...each,
          byName: givensByName(each.givens),
          line: givensAsFormula(each.givens),
          pages: each.parts.flatMap((part) => part.pages),
        }))
      : [],
  );
  /** Worked pages stand in a column beside the marks; without any there is one column, in the middle. */
  protected readonly hasPages = computed(() => this.problems().some(({ pages }) => pages.length > 0));
  protected readonly releasedOn = computed(() =>
    this.feedback.hasValue() ? dayOf(this.feedback.value().releasedAt, this.timeZone()) : '',
  );
  protected readonly handedIn = computed(() => {
    const at = this.feedback.hasValue() ? this.feedback.value().handedInAt : null;
    return at === null ? '' : momentOf(at, this.timeZone());
  });
  /** The first figures of the receipt's digest, in groups. */
  protected readonly receipt = computed(() => {
    const digest = this.feedback.hasValue() ? this.feedback.value().receipt : null;
    return digest?.slice(0, 12).replace(/(.{4})(?=.)/g, '$1 ') ?? '';
  });

  private readonly askedFor = rxResource({
    params: () => this.setId(),
    stream: ({ params }) => this.queriesApi.ownQueries(params),
  });
  /** The student's queries; null until they are here. Feedback is read without them. */
  protected readonly queries = computed(() => (this.askedFor.hasValue() ? this.askedFor.value() : null));
  protected readonly asking = signal<QueriedMark | null>(null);
  protected readonly policy = computed(() => {
    const terms = this.queries();
    return terms ? queryPolicyWords[terms.policy] : '';
  });
  protected readonly left = computed(() => spanOf((this.queries()?.closesAt ?? 0) - this.clock.now()));

  constructor() {
    this.typesetter.load();
    effect(() => {
      if (this.feedback.hasValue()) this.pageTitle.set(`Feedback on set ${String(this.feedback.value().number)}`);
    });
  }

  protected moment(at: number): string {
    return momentOf(at, this.timeZone());
  }

  protected queriesOn(position: number, partId: string): OwnQuery[] {
    return (this.queries()?.items ?? []).filter((each) => each.position === position && each.partId === partId);
  }

  protected askingOn(position: number, partId: string): QueriedMark | null {
    const mark = this.asking();
    return mark?.position === position && mark.partId === partId ? mark : null;
  }

  /** While a query on a part waits, no other can be asked. */
  protected mayQuery(position: number, partId: string): boolean {
    return (this.queries()?.isOpen ?? false) && this.queriesOn(position, partId).every(({ outcome }) => outcome);
  }

  protected query(position: number, { partId, label, criteria }: Part, criterionId: string): void {
    const criterionName = criteria.find(({ id }) => id === criterionId)?.name ?? '';
    this.asking.set({ position, partId, partLabel: label, criterionId, criterionName });
  }

  protected take(queries: OwnQueries): void {
    this.asking.set(null);
    this.askedFor.set(queries);
  }

  protected print(): void {
    window.print();
  }
}
