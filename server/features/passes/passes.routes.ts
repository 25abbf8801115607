import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { addCoverageSchema, coverageSchema } from '../../../shared/contract/coverage.ts';
import {
  changePassSchema,
  createPassSchema,
  finishPassSchema,
  listPassesQuerySchema,
  passCoverageSchema,
  passesPageSchema,
  passSchema,
} from '../../../shared/contract/passes.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function passesRoutes({ services: { passes, coverage } }: Deps): Route[] {
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
      method: 'patch',
      path: '/api/passes/:id',
      summary: 'Changes due date and instructions of an open pass.',
      access: 'signed-in',
      params: idParamsSchema,
      body: changePassSchema,
      response: passSchema,
      handler: ({ actor, params, body }) => passes.change(actor, params.id, body),
    }),
    defineRoute({
      method: 'get',
      path: '/api/passes/:id/coverage',
      summary: 'What has been seen and heard of the part of a pass, for its labeler and for curators.',
      access: 'signed-in',
      params: idParamsSchema,
      response: coverageSchema,
      handler: ({ actor, params }) => coverage.get(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/passes/:id/coverage',
      summary: 'Adds spans that were seen or heard in the own open pass; safe to repeat.',
      access: 'signed-in',
      status: 200,
      params: idParamsSchema,
      body: addCoverageSchema,
      response: passCoverageSchema,
      handler: ({ actor, params, body }) => coverage.add(actor, params.id, body),
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
