import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { onsetAnswerSchema, onsetQuerySchema } from '../../../shared/contract/onset.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function onsetsRoutes({ services: { onsets } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/recordings/:id/onset',
      summary: 'Where the sound in a span begins, picked on the untouched samples.',
      access: 'signed-in',
      params: idParamsSchema,
      query: onsetQuerySchema,
      response: onsetAnswerSchema,
      handler: ({ actor, params, query }) => onsets.pick(actor, params.id, query),
    }),
  ];
}
