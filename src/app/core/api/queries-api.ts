import { Injectable, inject } from '@angular/core';
import type { MarkedCriterion } from '@shared/marking';
import { type NewQuery, queriesRoutes } from '@shared/queries';
import type { QueryPolicy } from '@shared/query-policy';
import { ApiClient } from './api-client';

/** An answer to a mark query, as it is sent. */
export interface QueryAnswer {
  readonly queryId: string;
  /** The changed mark; null: the mark stands. */
  readonly criteria: MarkedCriterion[] | null;
  readonly words: string;
  /** The version of the answer that was looked at. */
  readonly version: number;
  readonly idempotencyKey: string;
}

/** Mark queries: a student's own, and those that the team answers. */
@Injectable({ providedIn: 'root' })
export class QueriesApi {
  private readonly api = inject(ApiClient);

  ownQueries(setId: string) {
    return this.api.call(queriesRoutes.ownQueries, { params: { setId } });
  }

  askQuery(setId: string, body: NewQuery, idempotencyKey: string) {
    return this.api.call(queriesRoutes.askQuery, { params: { setId }, body, idempotencyKey });
  }

  queries(courseId: string, page: number) {
    return this.api.call(queriesRoutes.queries, { params: { courseId }, query: { page } });
  }

  query(queryId: string) {
    return this.api.call(queriesRoutes.query, { params: { queryId } });
  }

  answerQuery({ queryId, criteria, words, version, idempotencyKey }: QueryAnswer) {
    return this.api.call(queriesRoutes.answerQuery, {
      params: { queryId },
      body: { criteria, words },
      version,
      idempotencyKey,
    });
  }

  changeClosing(setId: string, version: number, closesAt: number | null) {
    return this.api.call(queriesRoutes.changeClosing, { params: { setId }, version, body: { closesAt } });
  }

  changePolicy(courseId: string, policy: QueryPolicy) {
    return this.api.call(queriesRoutes.changePolicy, { params: { courseId }, body: { policy } });
  }
}
