import type { AuditService } from './features/audit/audit.service.ts';
import { createPhasesService, type PhasesService } from './features/phases/phases.service.ts';
import { createTimelineService, type TimelineService } from './features/timeline/timeline.service.ts';
import { createBytesTurn } from './features/videos/kept-bytes.ts';
import { createVideoSweepService, type VideoSweepService } from './features/videos/video-sweep.service.ts';
import { createVideosService, type VideosService } from './features/videos/videos.service.ts';
import type { Ground } from './ground.ts';
import type { MarkingServices } from './marking-services.ts';
import type { RecordingServices } from './recording-services.ts';

/** What lies beside the sound of a run, on its clock. */
export interface BesideServices {
  phases: PhasesService;
  timeline: TimelineService;
  videos: VideosService;
  videoSweep: VideoSweepService;
}

export function createBesideServices(
  ground: Ground,
  audit: AuditService,
  {
    runs,
    recordings,
    passes,
    events,
    uploadFolder,
  }: Pick<RecordingServices & MarkingServices, 'runs' | 'recordings' | 'passes' | 'events' | 'uploadFolder'>,
): BesideServices {
  const phases = createPhasesService({ ...ground, audit, runs, passes });
  const timeline = createTimelineService({ recordings, events, phases });
  const inTurn = createBytesTurn();
  const videos = createVideosService({ ...ground, audit, runs, passes, folder: uploadFolder, inTurn });
  const videoSweep = createVideoSweepService({ ...ground, audit, inTurn });
  return { phases, timeline, videos, videoSweep };
}
