import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { timelineQuerySchema, timelineSchema } from '../../../shared/contract/timeline.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function timelineRoutes({ services: { timeline } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/runs/:id/timeline',
      summary:
        'The recordings of a run on its clock, with level and rate of events over time; no rate for whoever works blind.',
      access: 'signed-in',
      params: idParamsSchema,
      query: timelineQuerySchema,
      response: timelineSchema,
      handler: ({ actor, params, query }) => timeline.get(actor, params.id, query.counted),
    }),
  ];
}
