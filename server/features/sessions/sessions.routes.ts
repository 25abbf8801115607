import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  changePasswordSchema,
  createdTokenSchema,
  createTokenSchema,
  currentSessionSchema,
  sessionsSchema,
  signedInSchema,
  signInSchema,
  tokensSchema,
} from '../../../shared/contract/sessions.ts';
import type { Deps } from '../../deps.ts';
import { identityOf } from '../../http/authenticate.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { forbidden } from '../../http/problem.ts';

export function sessionsRoutes(deps: Deps): Route[] {
  return [...sessionRoutes(deps), ...passwordRoutes(deps), ...tokenRoutes(deps)];
}

function sessionRoutes({ services, cookie }: Deps): Route[] {
  return [
    defineRoute({
      method: 'post',
      path: '/api/sessions',
      summary: 'Signs in with e-mail and password; the answer sets the cookie.',
      access: 'public',
      body: signInSchema,
      response: signedInSchema,
      status: 201,
      rateLimit: 'sign-in',
      handler: async ({ body, req, res }) => {
        const { token, user } = await services.sessions.signIn(body, req.get('User-Agent') ?? '');
        cookie.set(res, token);
        return { user };
      },
    }),
    defineRoute({
      method: 'get',
      path: '/api/sessions/current',
      summary: 'Tells who is signed in; `user` is null where nobody is.',
      access: 'public',
      response: currentSessionSchema,
      handler: ({ actor }) => ({ user: actor === null ? null : services.sessions.describe(actor) }),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/sessions/current',
      summary: 'Signs out.',
      access: 'public',
      status: 204,
      handler: ({ req, res }) => {
        const identity = identityOf(req);
        if (identity.via === 'cookie') services.sessions.end(identity.actor, identity.sessionId);
        cookie.clear(res);
      },
    }),
    defineRoute({
      method: 'get',
      path: '/api/sessions',
      summary: "Lists the person's own sessions.",
      access: 'signed-in',
      response: sessionsSchema,
      handler: ({ actor, req }) => {
        const identity = identityOf(req);
        return services.sessions.list(actor, identity.via === 'cookie' ? identity.sessionId : null);
      },
    }),
    defineRoute({
      method: 'delete',
      path: '/api/sessions/:id',
      summary: "Ends one of the person's own sessions.",
      access: 'signed-in',
      params: idParamsSchema,
      status: 204,
      handler: ({ actor, params }) => services.sessions.end(actor, params.id),
    }),
  ];
}

function passwordRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'put',
      path: '/api/password',
      summary: "Changes the person's own password, and signs out everywhere else.",
      access: 'signed-in',
      body: changePasswordSchema,
      status: 204,
      rateLimit: 'password',
      handler: ({ actor, body, req }) => {
        const identity = identityOf(req);
        if (identity.via !== 'cookie')
          throw forbidden('A password is changed in the browser, not by a script.');
        return services.password.change(actor, identity.sessionId, body);
      },
    }),
  ];
}

function tokenRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/tokens',
      summary: "Lists the person's tokens for scripts.",
      access: 'signed-in',
      response: tokensSchema,
      handler: ({ actor }) => services.tokens.list(actor),
    }),
    defineRoute({
      method: 'post',
      path: '/api/tokens',
      summary: 'Creates a token for scripts; it is told once.',
      access: 'signed-in',
      body: createTokenSchema,
      response: createdTokenSchema,
      status: 201,
      handler: ({ actor, body }) => services.tokens.create(actor, body),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/tokens/:id',
      summary: "Revokes one of the person's tokens.",
      access: 'signed-in',
      params: idParamsSchema,
      status: 204,
      handler: ({ actor, params }) => services.tokens.revoke(actor, params.id),
    }),
  ];
}
