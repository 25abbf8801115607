import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  listRunsQuerySchema,
  runSchema,
  runsPageSchema,
  saveRunSchema,
} from '../../../shared/contract/runs.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';

export function runsRoutes({ services }: Deps): Route[] {
  const { runs } = services;
  return [
    defineRoute({
      method: 'get',
      path: '/api/runs',
      summary: 'Runs that the person may see, filtered.',
      access: 'signed-in',
      query: listRunsQuerySchema,
      response: runsPageSchema,
      handler: ({ actor, query }) => runs.list(actor, query),
    }),
    defineRoute({
      method: 'post',
      path: '/api/runs',
      summary: 'Describes a new run of a lab.',
      access: 'signed-in',
      status: 201,
      body: saveRunSchema,
      response: runSchema,
      handler: ({ actor, body, res }) => withRevision(res, runs.create(actor, body)),
    }),
    defineRoute({
      method: 'get',
      path: '/api/runs/:id',
      summary: 'One run with its conditions.',
      access: 'signed-in',
      params: idParamsSchema,
      response: runSchema,
      handler: ({ actor, params, res }) => withRevision(res, runs.get(actor, params.id)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/runs/:id',
      summary: 'Replaces what is told about a run; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: saveRunSchema,
      response: runSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, runs.update(actor, params.id, readIfMatch({ req }), body)),
    }),
  ];
}
