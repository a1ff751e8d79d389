import type { Request, Response, Router } from 'express';
import type { z } from 'zod';
import type { Route } from '@shared/route';
import type { Context } from '../context';
import type { SignedIn } from '../access/policy';
import { invalidInput, invalidField, notSignedIn, versionMissing } from './errors';

/** A parsed request, as a route's handler gets it. */
export interface Call<R extends Route, User> {
  readonly user: User;
  readonly params: z.output<R['params']>;
  readonly query: z.output<R['query']>;
  readonly body: z.output<R['body']>;
  /** The version in `If-Match`; 0 where the route does not ask for one. */
  readonly version: number;
  /** The `Idempotency-Key`; empty where the route does not ask for one. */
  readonly idempotencyKey: string;
  readonly request: Request;
  readonly response: Response;
}

type Answer<R extends Route> = z.input<R['response']> | Promise<z.input<R['response']>>;

/** Adds routes to the application's router: who → parse → act → present. */
export interface Serve {
  /** A route for people who are signed in. */
  <R extends Route>(route: R, act: (call: Call<R, SignedIn>) => Answer<R>): void;
  /** A route that answers to anybody. */
  open<R extends Route>(route: R, act: (call: Call<R, SignedIn | null>) => Answer<R>): void;
  readonly routes: Route[];
}

/** The person behind a request, put there by the session middleware. */
export function personOf(response: Response): SignedIn | null {
  return (response.locals['person'] as SignedIn | undefined) ?? null;
}

/** Makes the function by which subjects add their routes. */
export function createServe(router: Router, context: Context): Serve {
  const routes: Route[] = [];

  function add<R extends Route>(route: R, act: (call: Call<R, SignedIn | null>) => Answer<R>): void {
    routes.push(route);
    const method = route.method.toLowerCase() as 'get' | 'post' | 'put' | 'patch' | 'delete';
    router[method](route.path, async (request, response) => {
      const user = personOf(response);
      if (!user && !route.open) throw notSignedIn();
      const call = { user, request, response, ...parse(route, request) } as Call<R, SignedIn | null>;
      const result: unknown = await act(call);
      if (response.headersSent) return;
      if (route.status === 204) {
        response.status(204).end();
        return;
      }
      const body: unknown = context.config.checkResponses ? route.response.parse(result) : result;
      if (typeof body === 'object' && body !== null && 'version' in body && typeof body.version === 'number') {
        response.setHeader('ETag', `"${String(body.version)}"`);
      }
      response.status(route.status).json(body);
    });
  }

  const serve = <R extends Route>(route: R, act: (call: Call<R, SignedIn>) => Answer<R>): void => {
    add(route, act as (call: Call<R, SignedIn | null>) => Answer<R>);
  };
  return Object.assign(serve, { open: add, routes });
}

function parse(route: Route, request: Request) {
  const params = parseWith(route.params, request.params, 'address');
  const query = parseWith(route.query, request.query, 'query');
  const body = parseWith(route.body, (request.body as unknown) ?? {}, 'body');
  return { params, query, body, version: versionOf(route, request), idempotencyKey: idempotencyKeyOf(route, request) };
}

function parseWith(schema: z.ZodType, value: unknown, where: 'address' | 'query' | 'body'): unknown {
  const parsed = schema.safeParse(value);
  if (parsed.success) return parsed.data;
  throw invalidInput(
    parsed.error.issues.map((issue) => ({
      path: [
        ...(where === 'body' ? [] : [where]),
        ...issue.path.map((step) => (typeof step === 'symbol' ? String(step) : step)),
      ],
      message: issue.message,
    })),
  );
}

function versionOf(route: Route, request: Request): number {
  if (!route.versioned) return 0;
  const header = request.get('If-Match');
  if (!header) throw versionMissing();
  const version = Number(/^(?:W\/)?"?(\d+)"?$/.exec(header)?.[1]);
  if (!Number.isSafeInteger(version)) throw invalidField(['If-Match'], 'If-Match must be a version number.');
  return version;
}

function idempotencyKeyOf(route: Route, request: Request): string {
  if (!route.idempotent) return '';
  const header = request.get('Idempotency-Key');
  if (!header || header.length > 100 || header.length < 8)
    throw invalidField(['Idempotency-Key'], 'Idempotency-Key must be 8 to 100 characters, new for every act.');
  return header;
}
