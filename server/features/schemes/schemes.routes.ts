import { z } from 'zod';
import { labelSchemeSchema } from '../../../shared/contract/schemes.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

const versionParamsSchema = z.object({ version: z.coerce.number().int().min(1) });

export function schemesRoutes({ services: { schemes } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/schemes/newest',
      summary: 'The label scheme in force, with the definition of each class.',
      access: 'public',
      response: labelSchemeSchema,
      handler: () => schemes.newest(),
    }),
    defineRoute({
      method: 'get',
      path: '/api/schemes/:version',
      summary: 'One version of the label scheme.',
      access: 'public',
      params: versionParamsSchema,
      response: labelSchemeSchema,
      handler: ({ params }) => schemes.get(params.version),
    }),
  ];
}
