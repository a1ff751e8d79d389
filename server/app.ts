import { randomUUID } from 'node:crypto';
import express, { Router, type Express } from 'express';
import { pinoHttp } from 'pino-http';
import { addAccountRoutes } from './accounts/accounts-routes';
import { createSessions, type Sessions } from './accounts/sessions';
import type { Context } from './context';
import { addCalendarRoutes } from './calendar/calendar-routes';
import { addCorrectionRoutes } from './corrections/correction-routes';
import { addCourseRoutes } from './courses/courses-routes';
import { addDeskRoutes } from './desk/desk-routes';
import { addAuditRoutes } from './problems/audit-routes';
import { addProblemRoutes } from './problems/problems-routes';
import { addReviewRoutes } from './problems/review-routes';
import { addTryOutRoutes } from './problems/try-out-routes';
import { addJobRoutes } from './jobs/job-routes';
import { addRecordRoutes } from './record/record-routes';
import { contentPolicy } from './http/content-policy';
import { notFound } from './http/errors';
import { openApiDocument } from './http/openapi';
import { demandSameOrigin } from './http/same-origin';
import { createServe, type Serve } from './http/serve';
import { serveClient } from './http/static-client';
import { translateErrors } from './http/translate-errors';
import { addMarkingRoutes } from './marking/marking-routes';
import { addOwnDataRoutes } from './own-data/own-data-routes';
import { addQueriesRoutes } from './queries/queries-routes';
import { addReceiptsRoutes } from './receipts/receipts-routes';
import { addResultsRoutes } from './results/results-routes';
import { addScriptsRoutes } from './scripts/scripts-routes';
import { addAllowanceRoutes } from './sets/allowance-routes';
import { addSetsRoutes } from './sets/sets-routes';

/** The application and what tests and the live connection need of it. */
export interface Application {
  readonly app: Express;
  readonly sessions: Sessions;
  readonly serve: Serve;
}

/** Largest JSON body; uploads have their own way in. */
const largestBody = '2mb';

/**
 * Builds the Express application from its parts. It does not listen.
 *
 * @param clientFolder the built client; left out in server tests
 */
export function createApp(context: Context, clientFolder?: string): Application {
  const { config, log, db } = context;
  const sessions = createSessions(db, config);
  const app = express();
  app.disable('x-powered-by');
  app.set('trust proxy', config.trustProxy);
  app.set('etag', false);

  app.use((_request, response, next) => {
    response.locals['requestId'] = randomUUID();
    response.setHeader('X-Request-Id', String(response.locals['requestId']));
    next();
  });
  app.use(contentPolicy(config.secureCookies));
  app.use(
    pinoHttp({
      logger: log,
      // Neither addresses, nor cookies, nor query texts: what is logged names no person.
      serializers: {
        req: (request: { method: string; url: string }) => ({
          method: request.method,
          // The address of a calendar is a secret.
          path: request.url.split('?')[0]?.replace(/(\/calendars\/)[^/]+/, '$1…'),
        }),
        res: (response: { statusCode: number }) => ({ status: response.statusCode }),
      },
      customProps: (_request, response) => ({ requestId: response.getHeader('X-Request-Id') }),
      customLogLevel: (_request, response) => (response.statusCode >= 500 ? 'error' : 'debug'),
    }),
  );

  const router = Router();
  const serve = createServe(router, context);
  app.use('/api', (_request, response, next) => {
    response.setHeader('Cache-Control', 'no-store');
    next();
  });
  app.use('/api', demandSameOrigin(config.origin));
  app.use('/api', express.json({ limit: largestBody }));

  app.get('/api/health', (_request, response) => {
    db.get('select 1');
    response.json({ status: 'ok' });
  });
  let document: unknown;
  app.get('/api/openapi.json', (_request, response) => {
    document ??= openApiDocument(serve.routes, '0.1.0');
    response.json(document);
  });

  app.use('/api', (request, response, next) => sessions.middleware(request, response, next));
  addAccountRoutes(serve, context, sessions);
  addCourseRoutes(serve, context);
  addCalendarRoutes(serve, context);
  addDeskRoutes(serve, context);
  addProblemRoutes(serve, context);
  addAuditRoutes(serve, context);
  addReviewRoutes(serve, context);
  addTryOutRoutes(serve, context);
  addJobRoutes(serve, context);
  addRecordRoutes(serve, context);
  addSetsRoutes(serve, context);
  addAllowanceRoutes(serve, context);
  addScriptsRoutes(serve, context);
  addReceiptsRoutes(serve, context);
  addQueriesRoutes(serve, context);
  addOwnDataRoutes(serve, context);
  addMarkingRoutes(serve, context);
  addCorrectionRoutes(serve, context);
  addResultsRoutes(serve, context);
  app.use('/api', router);
  app.use('/api', () => {
    throw notFound('address');
  });

  if (clientFolder) serveClient(app, clientFolder);
  app.use(translateErrors(log));
  return { app, sessions, serve };
}
