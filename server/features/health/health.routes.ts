import { healthSchema } from '../../../shared/contract/health.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function healthRoutes({ services }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/health',
      summary: 'Tells whether database, disk and jobs are well.',
      access: 'public',
      response: healthSchema,
      handler: async ({ actor, res }) => {
        const health = await services.health.read(actor);
        if (health.database === 'failed') res.status(503);
        return health;
      },
    }),
  ];
}
