import type { Request, RequestHandler, Response } from 'express';
import type { Actor } from '../../shared/policy/actor.ts';
import { ProblemError } from './problem.ts';
import { readCookie, type SessionCookie } from './session-cookie.ts';

export interface SessionIdentity {
  actor: Actor;
  sessionId: string;
  /** A fresh token for the cookie, where the one that came is old enough. */
  renewedToken: string | null;
}

/** What the sessions feature offers to HTTP: who stands behind a token, as the database says at this moment. */
export interface Authenticator {
  findBySessionToken(token: string, inUse: boolean): SessionIdentity | null;
  findByPersonalToken(token: string): Actor | null;
}

export type Identity =
  | { via: 'nobody'; actor: null }
  | { via: 'cookie'; actor: Actor; sessionId: string }
  | { via: 'token'; actor: Actor };

const nobody: Identity = { via: 'nobody', actor: null };
const identities = new WeakMap<Request, Identity>();

export function identityOf(request: Request): Identity {
  return identities.get(request) ?? nobody;
}

export function authenticate(authenticator: Authenticator, cookie: SessionCookie): RequestHandler {
  return (request, response, next) => {
    identities.set(request, identify(request, response, authenticator, cookie));
    next();
  };
}

function identify(
  request: Request,
  response: Response,
  authenticator: Authenticator,
  cookie: SessionCookie,
): Identity {
  const authorization = request.headers.authorization;
  if (authorization !== undefined)
    return { via: 'token', actor: requireTokenActor(authorization, authenticator) };
  const token = readCookie(request, cookie.name);
  const found = token === null ? null : authenticator.findBySessionToken(token, isUse(request));
  if (found === null || isForSomebodyElse(request, found.actor)) return nobody;
  if (found.renewedToken !== null) cookie.set(response, found.renewedToken);
  return { via: 'cookie', actor: found.actor, sessionId: found.sessionId };
}

/** An open page asks by itself who is signed in; only what a person does counts against the idle limit. */
function isUse(request: Request): boolean {
  return !(
    request.method === 'GET' &&
    ['/api/sessions/current', '/api/activity'].includes(request.baseUrl + request.path)
  );
}

/** Work that waited in a browser says whose it is: it must not go out under whoever is signed in there by now. */
function isForSomebodyElse(request: Request, actor: Actor): boolean {
  const personId = request.headers['recalesce-person'];
  return personId !== undefined && personId !== actor.id;
}

function requireTokenActor(authorization: string, authenticator: Authenticator): Actor {
  const token = /^Bearer ([\w.~+/-]{20,200}=*)$/i.exec(authorization)?.[1];
  const actor = token === undefined ? null : authenticator.findByPersonalToken(token);
  if (actor === null)
    throw new ProblemError('sign-in-required', 'This token is not valid, or not valid any more.');
  return actor;
}
