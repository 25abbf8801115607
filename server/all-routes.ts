import type { Deps } from './deps.ts';
import { activityRoutes } from './features/activity/activity.routes.ts';
import { auditRoutes } from './features/audit/audit.routes.ts';
import { healthRoutes } from './features/health/health.routes.ts';
import { labsRoutes } from './features/labs/labs.routes.ts';
import { peopleRoutes } from './features/people/people.routes.ts';
import { sessionsRoutes } from './features/sessions/sessions.routes.ts';
import type { Route } from './http/define-route.ts';

/** Every route of the service: mounted, described, and looked up in the access matrix from this one list. */
export function allRoutes(deps: Deps): Route[] {
  return [
    ...sessionsRoutes(deps),
    ...peopleRoutes(deps),
    ...labsRoutes(deps),
    ...auditRoutes(deps),
    ...activityRoutes(deps),
    ...healthRoutes(deps),
  ];
}
