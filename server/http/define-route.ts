import type { Request, Response } from 'express';
import type { z } from 'zod';
import type { Actor } from '../../shared/policy/actor.ts';
import { ProblemError } from './problem.ts';
import type { RateLimitName } from './rate-limits.ts';
import { validate, validateParams } from './validate.ts';

export type Access = 'public' | 'signed-in';
export type Method = 'get' | 'post' | 'put' | 'patch' | 'delete' | 'head' | 'options';
type Schema = z.ZodType | undefined;
type Parsed<S extends Schema> = S extends z.ZodType ? z.output<S> : undefined;
/** What a handler returns is sent; `undefined` means that it has answered through `res` itself, or that 204 is meant. */
type Result<R extends Schema> = R extends z.ZodType ? z.input<R> | undefined : undefined;
/** Answering through `res` alone reads best as a handler without `return`. */
type Returned<R extends Schema> =
  Result<R> | Promise<Result<R>> | (R extends z.ZodType ? never : Promise<void> | void);

export interface RouteContext<
  A extends Access = Access,
  P extends Schema = undefined,
  Q extends Schema = undefined,
  B extends Schema = undefined,
> {
  actor: A extends 'signed-in' ? Actor : Actor | null;
  params: Parsed<P>;
  query: Parsed<Q>;
  body: Parsed<B>;
  req: Request;
  res: Response;
  requestId: string;
}

interface RouteFacts {
  method: Method;
  /** In the router's notation: `/api/runs/:id`. */
  path: string;
  /** One sentence for the description of the interface. */
  summary: string;
  access: Access;
  /** Status of the success, 200 where it is not said; with 204 an empty answer is sent after the handler. */
  status?: number;
  rateLimit?: RateLimitName;
  /** Room for the JSON body; 256 KiB where it is not said. */
  bodyLimitBytes?: number;
  /** What a route sends that answers through `res` itself. */
  produces?: string;
}

interface RouteDefinition<
  A extends Access,
  P extends Schema,
  Q extends Schema,
  B extends Schema,
  R extends Schema,
> extends RouteFacts {
  access: A;
  params?: P;
  query?: Q;
  body?: B;
  response?: R;
  handler: (context: RouteContext<A, P, Q, B>) => Returned<R>;
}

export interface UnparsedContext {
  actor: Actor | null;
  params: unknown;
  query: unknown;
  body: unknown;
  req: Request;
  res: Response;
  requestId: string;
}

/** A route as data: mounted, described in OpenAPI, and looked up in the access matrix. */
export interface Route extends RouteFacts {
  params: z.ZodType | undefined;
  query: z.ZodType | undefined;
  body: z.ZodType | undefined;
  response: z.ZodType | undefined;
  run: (context: UnparsedContext) => unknown;
}

export function defineRoute<
  A extends Access,
  P extends Schema = undefined,
  Q extends Schema = undefined,
  B extends Schema = undefined,
  R extends Schema = undefined,
>(definition: RouteDefinition<A, P, Q, B, R>): Route {
  const { handler, ...facts } = definition;
  return {
    ...facts,
    params: definition.params,
    query: definition.query,
    body: definition.body,
    response: definition.response,
    run: (context) => handler(parseContext(definition, context)),
  };
}

function parseContext<A extends Access, P extends Schema, Q extends Schema, B extends Schema>(
  definition: { access: A; params?: P; query?: Q; body?: B },
  context: UnparsedContext,
): RouteContext<A, P, Q, B> {
  if (definition.access === 'signed-in' && context.actor === null) {
    throw new ProblemError('sign-in-required', 'This needs a person who is signed in.');
  }
  const parsed: unknown = {
    ...context,
    params: definition.params && validateParams(definition.params, context.params),
    query: definition.query && validate(definition.query, context.query),
    body: definition.body && validate(definition.body, context.body),
  };
  return parsed as RouteContext<A, P, Q, B>;
}
