import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  acceptInvitationSchema,
  createdInvitationSchema,
  createInvitationSchema,
  invitationsSchema,
  invitationTokenParamsSchema,
  listPeopleQuerySchema,
  openInvitationSchema,
  peoplePageSchema,
  personChoicesSchema,
  personSchema,
  setupSchema,
  updatePersonSchema,
} from '../../../shared/contract/people.ts';
import { signedInSchema } from '../../../shared/contract/sessions.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function peopleRoutes(deps: Deps): Route[] {
  return [...personRoutes(deps), ...invitationRoutes(deps), ...oneTimeLinkRoutes(deps)];
}

function personRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/people',
      summary: 'Lists people with their roles.',
      access: 'signed-in',
      query: listPeopleQuerySchema,
      response: peoplePageSchema,
      handler: ({ actor, query }) => services.people.list(actor, query),
    }),
    defineRoute({
      method: 'get',
      path: '/api/people/labelers',
      summary: 'Lists the names of those whom a curator may give a pass to.',
      access: 'signed-in',
      response: personChoicesSchema,
      handler: ({ actor }) => services.people.listLabelers(actor),
    }),
    defineRoute({
      method: 'get',
      path: '/api/people/:id',
      summary: 'Shows a person.',
      access: 'signed-in',
      params: idParamsSchema,
      response: personSchema,
      handler: ({ actor, params }) => services.people.get(actor, params.id),
    }),
    defineRoute({
      method: 'patch',
      path: '/api/people/:id',
      summary: 'Changes name, roles or memberships of a person, or disables the account.',
      access: 'signed-in',
      params: idParamsSchema,
      body: updatePersonSchema,
      response: personSchema,
      handler: ({ actor, params, body }) => services.people.update(actor, params.id, body),
    }),
  ];
}

function invitationRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/invitations',
      summary: 'Lists the invitations that nobody has accepted yet.',
      access: 'signed-in',
      response: invitationsSchema,
      handler: ({ actor }) => services.invitations.list(actor),
    }),
    defineRoute({
      method: 'post',
      path: '/api/invitations',
      summary: 'Invites somebody; the one-time link is told once.',
      access: 'signed-in',
      body: createInvitationSchema,
      response: createdInvitationSchema,
      status: 201,
      handler: ({ actor, body }) => services.invitations.create(actor, body),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/invitations/:id',
      summary: 'Takes an invitation back.',
      access: 'signed-in',
      params: idParamsSchema,
      status: 204,
      handler: ({ actor, params }) => services.invitations.revoke(actor, params.id),
    }),
  ];
}

function oneTimeLinkRoutes({ services, cookie }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/invitations/:token',
      summary: 'Shows the holder of a link whom it invites.',
      access: 'public',
      params: invitationTokenParamsSchema,
      response: openInvitationSchema,
      rateLimit: 'one-time-link',
      handler: ({ params }) => services.acceptance.open(params.token),
    }),
    defineRoute({
      method: 'post',
      path: '/api/invitations/:token/accept',
      summary: 'Makes the account that a link invites to, and signs it in.',
      access: 'public',
      params: invitationTokenParamsSchema,
      body: acceptInvitationSchema,
      response: signedInSchema,
      status: 201,
      rateLimit: 'one-time-link',
      handler: async ({ params, body, req, res }) => {
        const personId = await services.acceptance.accept(params.token, body);
        const { token, user } = services.sessions.start(personId, req.get('User-Agent') ?? '');
        cookie.set(res, token);
        return { user };
      },
    }),
    defineRoute({
      method: 'post',
      path: '/api/setup',
      summary: 'Makes the first administrator with the link that the first start printed, and signs in.',
      access: 'public',
      body: setupSchema,
      response: signedInSchema,
      status: 201,
      rateLimit: 'one-time-link',
      handler: async ({ body, req, res }) => {
        const personId = await services.setup.setUp(body);
        const { token, user } = services.sessions.start(personId, req.get('User-Agent') ?? '');
        cookie.set(res, token);
        return { user };
      },
    }),
  ];
}
