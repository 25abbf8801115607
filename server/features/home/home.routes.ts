import { homeSchema } from '../../../shared/contract/home.ts';
import type { Deps } from '../../deps.ts';
import { defineRoute, type Route } from '../../http/define-route.ts';

export function homeRoutes({ services: { home } }: Deps): Route[] {
  return [
    defineRoute({
      method: 'get',
      path: '/api/home',
      summary: 'What waits for this person, by role.',
      access: 'signed-in',
      response: homeSchema,
      handler: ({ actor }) => home.get(actor),
    }),
  ];
}
