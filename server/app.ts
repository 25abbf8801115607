import path from 'node:path';
import express, { type Express, type RequestHandler } from 'express';
import { allRoutes } from './all-routes.ts';
import type { Deps } from './deps.ts';
import { authenticate, type Authenticator } from './http/authenticate.ts';
import { compressText } from './http/compress.ts';
import { refuseCrossSite } from './http/csrf.ts';
import { docsPage } from './http/docs-page.ts';
import type { Route } from './http/define-route.ts';
import { mountRoutes } from './http/mount-routes.ts';
import { describeRoutes } from './http/openapi.ts';
import { problemHandler, unknownRoute } from './http/problem-handler.ts';
import { requestLog } from './http/request-log.ts';
import { nonceOf, securityHeaders } from './http/security-headers.ts';
import { mountStaticClient } from './http/static-client.ts';

interface AppOptions {
  /** In development the client comes from the bundler's middleware instead of the built files. */
  client?: RequestHandler;
}

/** The order in which a request meets the parts of the server. */
export function createApp(deps: Deps, options: AppOptions = {}): Express {
  const { config, log, cookie } = deps;
  const app = express();
  app.disable('x-powered-by');
  app.set('etag', false);
  app.set('trust proxy', config.trustProxyHops);
  app.use(requestLog(log));
  app.use(securityHeaders({ secure: config.secure, development: config.development }));
  app.use(compressText());
  app.use(
    '/api',
    neverStored,
    authenticate(authenticatorOf(deps), cookie),
    refuseCrossSite(config.publicUrl),
  );
  const routes = allRoutes(deps);
  mountRoutes(app, routes);
  mountDescription(app, routes, config.publicUrl);
  app.all(['/api', '/api/*splat'], unknownRoute);
  if (options.client === undefined) mountStaticClient(app, path.join(config.projectRoot, 'dist', 'client'));
  else app.use(options.client);
  app.use(problemHandler());
  return app;
}

const neverStored: RequestHandler = (_request, response, next) => {
  response.setHeader('Cache-Control', 'no-store');
  next();
};

function authenticatorOf({ services }: Deps): Authenticator {
  return {
    findBySessionToken: (token, inUse) => services.identities.findBySessionToken(token, inUse),
    findByPersonalToken: (token) => services.tokens.find(token),
  };
}

function mountDescription(app: Express, routes: readonly Route[], publicUrl: string): void {
  const description = describeRoutes(routes, publicUrl);
  app.get('/api/openapi.json', (_request, response) => {
    response.json(description);
  });
  app.get('/api/docs', (_request, response) => {
    response.type('html').send(docsPage(routes, nonceOf(response)));
  });
}
