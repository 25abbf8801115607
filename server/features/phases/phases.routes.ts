import { idParamsSchema } from '../../../shared/contract/ids.ts';
import {
  createPhaseSchema,
  patchPhaseSchema,
  phaseSchema,
  phasesSchema,
  putPhaseSchema,
} from '../../../shared/contract/phases.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';
import { readIfMatch, withRevision } from '../../http/revision.ts';

export function phasesRoutes({ services: { phases } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/runs/:id/phases',
      summary:
        'Growth phases of a run that the person may see, in order of time; none for whoever works blind.',
      access: 'signed-in',
      params: idParamsSchema,
      response: phasesSchema,
      handler: ({ actor, params }) => phases.list(actor, params.id),
    }),
    defineRoute({
      method: 'post',
      path: '/api/runs/:id/phases',
      summary: 'Tells a growth phase of a run, as its lab or in the own open pass.',
      access: 'signed-in',
      status: 201,
      params: idParamsSchema,
      body: createPhaseSchema,
      response: phaseSchema,
      handler: ({ actor, params, body, res }) => withRevision(res, phases.create(actor, params.id, body)),
    }),
    defineRoute({
      method: 'put',
      path: '/api/phases/:id',
      summary:
        'Tells a growth phase under an id made by the client; safe to repeat. Replaces it under If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: putPhaseSchema,
      response: phaseSchema,
      handler: ({ actor, params, body, req, res }) => {
        const revision = req.headers['if-match'] === undefined ? null : readIfMatch({ req });
        return withRevision(res, phases.put(actor, params.id, body, revision));
      },
    }),
    defineRoute({
      method: 'patch',
      path: '/api/phases/:id',
      summary: 'Changes fields of a growth phase; needs If-Match.',
      access: 'signed-in',
      params: idParamsSchema,
      body: patchPhaseSchema,
      response: phaseSchema,
      handler: ({ actor, params, body, req, res }) =>
        withRevision(res, phases.patch(actor, params.id, body, readIfMatch({ req }))),
    }),
    defineRoute({
      method: 'delete',
      path: '/api/phases/:id',
      summary: 'Removes a growth phase; needs If-Match.',
      access: 'signed-in',
      status: 204,
      params: idParamsSchema,
      handler: ({ actor, params, req }) => phases.remove(actor, params.id, readIfMatch({ req })),
    }),
  ];
}
