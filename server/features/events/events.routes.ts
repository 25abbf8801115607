import {
  createEventSchema,
  eventSchema,
  eventsSchema,
  listEventsQuerySchema,
  patchEventSchema,
  putEventSchema,
} from '../../../shared/contract/events.ts';
import { idParamsSchema } from '../../../shared/contract/ids.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';

export function eventsRoutes({ services: { events } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/events',
      summary: 'Marks of a recording that the person may see, in order of time.',
      access: 'signed-in',
      params: idParamsSchema,
      query: listEventsQuerySchema,
      response: eventsSchema,
      handler: ({ actor, params, query }) => ({ items: events.list(actor, params.id, query.passId) }),
    }),
    defineRoute({
      method: 'post',
      path: '/api/recordings/:id/events',
      summary: 'Sets a mark in the own open pass.',
      access: 'signed-in',
      status: 201,
      params: idParamsSchema,
      body: createEventSchema,
      response: eventSchema,
      handler: async ({ actor, params, body, res }) =>
        withRevision(res, await events.create(actor, params.id, body)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/events/:id',
      summary: 'Sets a mark under an id made by the client; safe to repeat. Replaces it under If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: putEventSchema,
      response: eventSchema,
      handler: async ({ actor, params, body, req, res }) => {
        const revision = req.headers['if-match'] === undefined ? null : readIfMatch({ req });
        return withRevision(res, await events.put(actor, params.id, body, revision));
      },
    }),
    defineRoute({
      method: 'patch',
      path: '/api/events/:id',
      summary: 'Changes fields of an own mark; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: patchEventSchema,
      response: eventSchema,
      handler: async ({ actor, params, body, req, res }) =>
        withRevision(res, await events.patch(actor, params.id, body, readIfMatch({ req }))),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/events/:id',
      summary: 'Deletes an own mark; needs If-Match.',
      access: 'signed-in',
      status: 204,
      params: idParamsSchema,
      handler: ({ actor, params, req }) => events.remove(actor, params.id, readIfMatch({ req })),
    }),
  ];
}
