import { ChangeDetectionStrategy, Component, computed, effect, inject, input, linkedSignal } from '@angular/core';
import { rxResource } from '@angular/core/rxjs-interop';
import { MatButtonModule } from '@angular/material/button';
import { RouterLink } from '@angular/router';
import type { Query } from '@shared/queries';
import { queryPolicyWords } from '@shared/query-policy';
import { printComplex, printNumber } from '@shared/reading/print';
import { momentOf } from '@shared/times';
import { QueriesApi } from '../../core/api/queries-api';
import { sentenceOf } from '../../core/api/request-failure';
import { PageTitle } from '../../core/page-title';
import { Session } from '../../core/session';
import { ErrorState } from '../../ui/error-state/error-state';
import { FormulaText } from '../../ui/formula-text/formula-text';
import { Typesetter } from '../../ui/formula-text/typesetter';
import { LoadingBars } from '../../ui/loading-bars/loading-bars';
import { WorkedPages } from '../../ui/worked-pages/worked-pages';
import { givensAsFormula, givensByName } from '../feedback/printed-givens';
import { AnswerQuery } from './answer-query';

/** A mark query beside the answer, its marks and the mark scheme; answered here by who did not give the mark. */
@Component({
  selector: 'app-query-page',
  imports: [AnswerQuery, ErrorState, FormulaText, LoadingBars, MatButtonModule, RouterLink, WorkedPages],
  templateUrl: './query-page.html',
  styleUrl: './query-page.scss',
  changeDetection: ChangeDetectionStrategy.OnPush,
})
export default class QueryPage {
  private readonly api = inject(QueriesApi);
  private readonly session = inject(Session);
  private readonly pageTitle = inject(PageTitle);
  protected readonly typesetter = inject(Typesetter);

  readonly courseId = input.required<string>();
  readonly queryId = input.required<string>();

  protected readonly fetched = rxResource({
    params: () => this.queryId(),
    stream: ({ params }) => this.api.query(params),
  });
  protected readonly problem = computed(() => (this.fetched.error() ? sentenceOf(this.fetched.error()) : null));
  protected readonly query = linkedSignal(() => (this.fetched.hasValue() ? this.fetched.value() : null));
  protected readonly givens = computed(() => givensByName(this.query()?.givens ?? []));
  protected readonly numbers = computed(() => givensAsFormula(this.query()?.givens ?? []));
  protected readonly policy = computed(() => queryPolicyWords[this.query()?.policy ?? 'raise or lower']);
  /** What the marks on the page are called, the newest first. */
  protected readonly history = computed(() =>
    [...(this.query()?.marks ?? [])].reverse().map((mark) => ({
      ...mark,
      what: mark.replacesId === null ? `${mark.kind} mark by` : 'changed by',
      who: mark.marker ?? 'the check',
      when: this.moment(mark.at),
    })),
  );

  constructor() {
    this.typesetter.load();
    effect(() => {
      const query = this.query();
      if (query) this.pageTitle.set(`Query on ${query.part} of set ${String(query.setNumber)}`);
    });
  }

  protected moment(at: number): string {
    return momentOf(at, this.session.course()?.timeZone ?? 'UTC');
  }

  protected keyOf({ key }: Query): string {
    if (!key) return '';
    const value = printValue(key.value);
    return value && `key ${value}${key.unit ? ` ${key.unit}` : ''}`;
  }

  protected outcomeOf({ outcome }: Query): string {
    if (!outcome) return '';
    const { before, after } = outcome;
    return before === after
      ? `The mark, ${String(after)}, stands.`
      : `The mark went from ${String(before)} to ${String(after)}.`;
  }

  protected take(query: Query): void {
    this.query.set(query);
  }
}

function printValue(value: unknown): string {
  if (typeof value === 'number') return printNumber(value, 5);
  if (typeof value === 'string') return value;
  if (Array.isArray(value)) return `[${value.map(printValue).join(', ')}]`;
  if (typeof value === 'object' && value !== null && 're' in value && 'im' in value)
    return printComplex({ re: Number(value.re), im: Number(value.im) }, 5);
  return '';
}
