import type { AuditService } from './features/audit/audit.service.ts';
import { createPhasesService, type PhasesService } from './features/phases/phases.service.ts';
import { createTimelineService, type TimelineService } from './features/timeline/timeline.service.ts';
import type { Ground } from './ground.ts';
import type { MarkingServices } from './marking-services.ts';
import type { RecordingServices } from './recording-services.ts';

/** What lies beside the sound of a run, on its clock. */
export interface BesideServices {
  phases: PhasesService;
  timeline: TimelineService;
}

export function createBesideServices(
  ground: Ground,
  audit: AuditService,
  {
    runs,
    recordings,
    passes,
    events,
  }: Pick<RecordingServices & MarkingServices, 'runs' | 'recordings' | 'passes' | 'events'>,
): BesideServices {
  const phases = createPhasesService({ ...ground, audit, runs, passes });
  const timeline = createTimelineService({ recordings, events, phases });
  return { phases, timeline };
}
