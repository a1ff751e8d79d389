import { HttpClient } from '@angular/common/http';
import { Injectable, inject } from '@angular/core';
import { map, type Observable } from 'rxjs';
import type * as z from 'zod';
import { pathOf, type Route } from '@shared/route';

type Fields<Schema extends z.ZodType> = keyof z.input<Schema> extends never ? object : z.input<Schema>;

/** What a call of a route carries. Empty parts may be left out. */
export interface CallParts<R extends Route> {
  readonly params?: Fields<R['params']>;
  readonly query?: Fields<R['query']>;
  readonly body?: z.input<R['body']>;
  /** For routes that demand the version they change. */
  readonly version?: number;
  /** For routes where the same key twice is the same result; `newIdempotencyKey()` makes one. */
  readonly idempotencyKey?: string;
}

/** Calls the routes that client and server agree on. Each subject has a service of its own on top. */
@Injectable({ providedIn: 'root' })
export class ApiClient {
  private readonly http = inject(HttpClient);

  /** Sends a request when subscribed to, and parses the response by the route's schema. */
  call<R extends Route>(route: R, parts: CallParts<R> = {}): Observable<z.output<R['response']>> {
    const headers: Record<string, string> = {};
    if (parts.version !== undefined) headers['If-Match'] = `"${String(parts.version)}"`;
    if (parts.idempotencyKey !== undefined) headers['Idempotency-Key'] = parts.idempotencyKey;
    const url = `/api${pathOf(route, parts.params ?? {})}`;
    const options = { headers, params: queryOf(parts.query), body: parts.body as unknown };
    return this.http
      .request<unknown>(route.method, url, options)
      .pipe(map((body) => (route.status === 204 ? {} : route.response.parse(body)) as z.output<R['response']>));
  }
}

/** A key for one act; repeat the act with the same key and it happens once. */
export function newIdempotencyKey(): string {
  return crypto.randomUUID();
}

function queryOf(query: unknown): Record<string, string> {
  const entries = Object.entries((query ?? {}) as Record<string, unknown>);
  return Object.fromEntries(
    entries.filter(([, value]) => value !== undefined && value !== '').map(([name, value]) => [name, String(value)]),
  );
}
