import express, { type Express } from 'express';
import { randomUUID } from 'node:crypto';
import { existsSync } from 'node:fs';
import { join } from 'node:path';
import passport from 'passport';
import { productVersion } from './database/version.ts';
import type { Deps } from './http/deps.ts';
import { withRequestId } from './http/logger.ts';
import { openApiDocument } from './http/openapi.ts';
import { originCheck } from './http/origin-check.ts';
import { noSuchRoute, problemHandler } from './http/problem.ts';
import { routeTable, type RouteDeclaration } from './http/route.ts';
import { securityHeaders } from './http/security-headers.ts';
import { attachActor } from './http/session/attach-actor.ts';
import { sessionMiddleware } from './http/session/session.ts';
import { declareRoutes } from './routes.ts';

export interface Application {
  express: Express;
  /** Every route as declared: the permission walk and the API description read it. */
  routes: readonly RouteDeclaration[];
}

const clientFolder = join(import.meta.dirname, '../dist/client');

/** Builds the Express application without listening, so that tests can hold it. */
export function buildApplication(deps: Deps): Application {
  const { orm, pool, settings } = deps;
  const app = express();
  app
    .disable('x-powered-by')
    .disable('etag')
    .set('query parser', 'simple')
    .set('trust proxy', [...settings.trustProxy]);
  app.use((request, response, next) => {
    const requestId = randomUUID();
    response.locals['requestId'] = requestId;
    // On the loopback without TLS the browser still keeps a Secure cookie; the session must be told so.
    if (new URL(settings.publicUrl).protocol === 'http:') {
      Object.defineProperty(request, 'secure', { value: true });
    }
    withRequestId(requestId, next);
  });
  app.use(securityHeaders(settings.publicUrl));

  const table = routeTable();
  declareRoutes(table, deps);
  const description = openApiDocument(table.declared, productVersion);
  table.router.get('/openapi.json', (_request, response) => {
    response.json(description);
  });

  app.use(
    '/api/v1',
    originCheck(settings.publicUrl),
    express.json({ limit: '1mb' }),
    sessionMiddleware(settings, pool),
    passport.initialize(),
    passport.session(),
    attachActor(orm),
    table.router,
    noSuchRoute,
  );
  serveClient(app);
  app.use(problemHandler);
  return { express: app, routes: table.declared };
}

function serveClient(app: Express): void {
  if (!existsSync(clientFolder)) return;
  app.use(
    '/assets',
    express.static(join(clientFolder, 'assets'), {
      immutable: true,
      maxAge: '1y',
      index: false,
    }),
    noSuchRoute,
  );
  app.use(express.static(clientFolder, { index: false, maxAge: 0 }));
  app.get('/*path', (_request, response) => {
    response.set('Cache-Control', 'no-cache').sendFile(join(clientFolder, 'index.html'));
  });
  app.get('/', (_request, response) => {
    response.set('Cache-Control', 'no-cache').sendFile(join(clientFolder, 'index.html'));
  });
}
