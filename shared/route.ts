import * as z from 'zod';

/** The HTTP methods in use. */
export type Method = 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';

/** What client and server agree on about one route; the OpenAPI document is generated from it. */
export interface Route<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Response extends z.ZodType = z.ZodType,
> {
  readonly method: Method;
  /** Below `/api`, with `:name` for each of `params`. */
  readonly path: string;
  /** One line for the API document. */
  readonly summary: string;
  readonly params: Params;
  readonly query: Query;
  readonly body: Body;
  readonly response: Response;
  readonly status: 200 | 201 | 204;
  /** Whether the request must carry `If-Match` with the version that it changes. */
  readonly versioned: boolean;
  /** Whether the request must carry `Idempotency-Key`: the same key twice is the same result. */
  readonly idempotent: boolean;
  /** Whether it answers to people who are not signed in. */
  readonly open: boolean;
}

const nothing = z.object({});

interface RouteParts<P extends z.ZodType, Q extends z.ZodType, B extends z.ZodType, R extends z.ZodType> {
  readonly method: Method;
  readonly path: string;
  readonly summary: string;
  readonly params?: P;
  readonly query?: Q;
  readonly body?: B;
  readonly response?: R;
  readonly status?: 200 | 201 | 204;
  readonly versioned?: boolean;
  readonly idempotent?: boolean;
  readonly open?: boolean;
}

/** Describes a route; what is left out is empty. Without a response it answers 204. */
export function defineRoute<
  P extends z.ZodType = typeof nothing,
  Q extends z.ZodType = typeof nothing,
  B extends z.ZodType = typeof nothing,
  R extends z.ZodType = typeof nothing,
>(parts: RouteParts<P, Q, B, R>): Route<P, Q, B, R> {
  return {
    method: parts.method,
    path: parts.path,
    summary: parts.summary,
    params: parts.params ?? (nothing as unknown as P),
    query: parts.query ?? (nothing as unknown as Q),
    body: parts.body ?? (nothing as unknown as B),
    response: parts.response ?? (nothing as unknown as R),
    status: parts.status ?? (parts.response ? (parts.method === 'POST' ? 201 : 200) : 204),
    versioned: parts.versioned ?? false,
    idempotent: parts.idempotent ?? false,
    open: parts.open ?? false,
  };
}

/** The path of a route with its parameters filled in, for example `/courses/42/sets`. */
export function pathOf(route: Route, params: Readonly<Record<string, string | number>>): string {
  return route.path.replace(/:([A-Za-z]+)/g, (_, name: string) => encodeURIComponent(String(params[name] ?? '')));
}
