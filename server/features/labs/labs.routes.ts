import { idParamsSchema } from '../../../shared/contract/ids.ts';
import { labSchema, labsSchema, saveLabSchema } from '../../../shared/contract/labs.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function labsRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/labs',
      summary: 'Lists the labs that the person belongs to; all of them for an administrator.',
      access: 'signed-in',
      response: labsSchema,
      handler: ({ actor }) => services.labs.list(actor),
    }),
    defineRoute({
      method: 'post',
      path: '/api/labs',
      summary: 'Creates a lab.',
      access: 'signed-in',
      body: saveLabSchema,
      response: labSchema,
      status: 201,
      handler: ({ actor, body }) => services.labs.create(actor, body),
    }),
    defineRoute({
      method: 'patch',
      path: '/api/labs/:id',
      summary: 'Renames a lab.',
      access: 'signed-in',
      params: idParamsSchema,
      body: saveLabSchema,
      response: labSchema,
      handler: ({ actor, params, body }) => services.labs.rename(actor, params.id, body),
    }),
  ];
}
