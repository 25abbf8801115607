import express, { type Express, type Request, type RequestHandler, type Response } from 'express';
import { identityOf } from './authenticate.ts';
import type { Route } from './define-route.ts';
import { ProblemError } from './problem.ts';
import { createRateLimits, type RateLimitName } from './rate-limits.ts';
import { requestIdOf } from './request-log.ts';

type Limits = Record<RateLimitName, RequestHandler[]>;

/** Registers every route; paths that exist under another method answer 405. */
export function mountRoutes(app: Express, routes: readonly Route[]): void {
  const limits = createRateLimits();
  for (const route of routes) app[route.method](route.path, ...handlersOf(route, limits));
  for (const [path, methods] of methodsByPath(routes)) app.all(path, refuseMethod(methods));
}

function handlersOf(route: Route, limits: Limits): RequestHandler[] {
  const parsers = route.body === undefined ? [] : jsonParsers(route.bodyLimitBytes ?? 256 * 1024);
  const limiters = route.rateLimit === undefined ? [] : limits[route.rateLimit];
  return [refuseUnsigned(route), ...parsers, ...limiters, answer(route)];
}

/** Before the body is read: nobody's bytes are worth parsing for a refusal. */
function refuseUnsigned(route: Route): RequestHandler {
  return (request, _response, next) => {
    if (route.access === 'public' || identityOf(request).actor !== null) return next();
    next(new ProblemError('sign-in-required', 'This needs a person who is signed in.'));
  };
}

function jsonParsers(limit: number): RequestHandler[] {
  return [
    (request, _response, next) => {
      if (request.is('application/json') !== false) return next();
      next(
        new ProblemError(
          'unsupported-type',
          'The body must be JSON, with the content type application/json.',
        ),
      );
    },
    express.json({ limit, strict: false }),
  ];
}

function answer(route: Route): RequestHandler {
  return async (request, response) => {
    const result = await route.run({
      actor: identityOf(request).actor,
      params: request.params,
      query: request.query,
      body: request.body,
      req: request,
      res: response,
      requestId: requestIdOf(request),
    });
    send(route, response, result);
  };
}

/** Answers pass the contract on their way out, so that a field nobody declared cannot leave. */
function send(route: Route, response: Response, result: unknown): void {
  if (response.headersSent) return;
  if (route.response === undefined) {
    if (route.status === 204) response.status(204).end();
    return;
  }
  if (result === undefined) return;
  response.status(route.status ?? 200).json(route.response.parse(result));
}

function methodsByPath(routes: readonly Route[]): Map<string, string[]> {
  const found = new Map<string, string[]>();
  for (const { path, method } of routes) found.set(path, [...(found.get(path) ?? []), method.toUpperCase()]);
  return found;
}

function refuseMethod(methods: string[]): RequestHandler {
  return (request: Request, response, next) => {
    response.setHeader('Allow', methods.join(', '));
    next(
      new ProblemError(
        'method-not-allowed',
        `${request.method} is not possible here, only ${methods.join(', ')}.`,
      ),
    );
  };
}
