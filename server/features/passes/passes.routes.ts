import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  createPassSchema,
  finishPassSchema,
  listPassesQuerySchema,
  passesPageSchema,
  passSchema,
} from '../../../shared/contract/passes.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function passesRoutes({ services: { passes } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/passes',
      summary: 'Passes that the person may see: the own ones, for a curator all.',
      access: 'signed-in',
      query: listPassesQuerySchema,
      response: passesPageSchema,
      handler: ({ actor, query }) => passes.list(actor, query),
    }),
    defineRoute({
      method: 'post',
      path: '/api/passes',
      summary: 'Gives a measured, shared recording to a labeler.',
      access: 'signed-in',
      status: 201,
      body: createPassSchema,
      response: passSchema,
      handler: ({ actor, body }) => passes.create(actor, body),
    }),
    defineRoute({
      method: 'post',
      path: '/api/passes/:id/finish',
      summary: 'Ends the own pass; its marks cannot be changed afterwards.',
      access: 'signed-in',
      params: idParamsSchema,
      body: finishPassSchema,
      response: passSchema,
      handler: ({ actor, params, body }) => passes.finish(actor, params.id, body.remark),
    }),
    defineRoute({
      method: 'post',
      path: '/api/passes/:id/cancel',
      summary: 'Takes an open pass back.',
      access: 'signed-in',
      params: idParamsSchema,
      response: passSchema,
      handler: ({ actor, params }) => passes.cancel(actor, params.id),
    }),
  ];
}
