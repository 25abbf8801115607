import type { Deps } from './deps.ts';
import { activityRoutes } from './features/activity/activity.routes.ts';
import { auditRoutes } from './features/audit/audit.routes.ts';
import { healthRoutes } from './features/health/health.routes.ts';
import { labsRoutes } from './features/labs/labs.routes.ts';
import { peopleRoutes } from './features/people/people.routes.ts';
import { candidatesRoutes } from './features/recordings/candidates.routes.ts';
import { onsetsRoutes } from './features/recordings/onsets.routes.ts';
import { recordingViewsRoutes } from './features/recordings/recording-views.routes.ts';
import { recordingsRoutes } from './features/recordings/recordings.routes.ts';
import { runsRoutes } from './features/runs/runs.routes.ts';
import { sensorsRoutes } from './features/sensors/sensors.routes.ts';
import { sessionsRoutes } from './features/sessions/sessions.routes.ts';
import { uploadsRoutes } from './features/uploads/uploads.routes.ts';
import { schemesRoutes } from './features/schemes/schemes.routes.ts';
import { phasesRoutes } from './features/phases/phases.routes.ts';
import { timelineRoutes } from './features/timeline/timeline.routes.ts';
import { videosRoutes } from './features/videos/videos.routes.ts';
import { passesRoutes } from './features/passes/passes.routes.ts';
import { roundsRoutes } from './features/rounds/rounds.routes.ts';
import { eventsRoutes } from './features/events/events.routes.ts';
import { reviewsRoutes } from './features/reviews/reviews.routes.ts';
import { collectionsRoutes } from './features/collections/collections.routes.ts';
import { releasesRoutes } from './features/releases/releases.routes.ts';
import { tracesRoutes } from './features/traces/traces.routes.ts';
import { homeRoutes } from './features/home/home.routes.ts';
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
    ...runsRoutes(deps),
    ...sensorsRoutes(deps),
    ...uploadsRoutes(deps),
    ...recordingsRoutes(deps),
    ...recordingViewsRoutes(deps),
    ...candidatesRoutes(deps),
    ...onsetsRoutes(deps),
    ...schemesRoutes(deps),
    ...passesRoutes(deps),
    ...phasesRoutes(deps),
    ...timelineRoutes(deps),
    ...videosRoutes(deps),
    ...eventsRoutes(deps),
    ...roundsRoutes(deps),
    ...tracesRoutes(deps),
    ...reviewsRoutes(deps),
    ...collectionsRoutes(deps),
    ...releasesRoutes(deps),
    ...homeRoutes(deps),
  ];
}
