import type { AuditService } from './features/audit/audit.service.ts';
import {
  createCollectionsService,
  type CollectionsService,
} from './features/collections/collections.service.ts';
import { createEventsService, type EventsService } from './features/events/events.service.ts';
import { createHomeService, type HomeService } from './features/home/home.service.ts';
import { createCoverageService, type CoverageService } from './features/passes/coverage.service.ts';
import { createPassesService, type PassesService } from './features/passes/passes.service.ts';
import { createCollectingService } from './features/recordings/collecting.service.ts';
import { createGuardService, type GuardService } from './features/recordings/guard.service.ts';
import { createMarkingService } from './features/recordings/marking.service.ts';
import { createReleasePlan } from './features/releases/release-plan.ts';
import { createReleasesService, type ReleasesService } from './features/releases/releases.service.ts';
import { createAnswersService, type AnswersService } from './features/rounds/answers.service.ts';
import { createRoundOrders, type RoundOrders } from './features/rounds/round-orders.ts';
import { createRoundsService, type RoundsService } from './features/rounds/rounds.service.ts';
import { createReviewsService, type ReviewsService } from './features/reviews/reviews.service.ts';
import { createSchemesService, type SchemesService } from './features/schemes/schemes.service.ts';
import { createTracePointsService, type TracePointsService } from './features/traces/trace-points.service.ts';
import { createTracesService, type TracesService } from './features/traces/traces.service.ts';
import type { Ground } from './ground.ts';
import { createWorkerPool } from './jobs/worker-pool.ts';
import { findLookAlikesIn, lookAlikesWorkerModule } from './measuring/look-alikes-in-worker.ts';
import type { CandidateDescriptors } from './signal/look-alike-features.ts';
import type { LookAlikeGroup } from './signal/look-alike-group.ts';
import type { ArchiveTask } from './packaging/archive.worker.ts';
import type { BuiltArchive } from './packaging/build-archive.ts';
import { archiveWorkerModule, type ArchivePool } from './packaging/build-in-worker.ts';
import type { RecordingServices } from './recording-services.ts';

/** Everything from the measured recording to the released data set. */
export interface MarkingServices {
  schemes: SchemesService;
  passes: PassesService;
  coverage: CoverageService;
  traces: TracesService;
  tracePoints: TracePointsService;
  events: EventsService;
  rounds: RoundsService;
  answers: AnswersService;
  guard: GuardService;
  reviews: ReviewsService;
  collections: CollectionsService;
  releases: ReleasesService;
  archivePool: ArchivePool;
  home: HomeService;
}

export function createMarkingServices(
  ground: Ground,
  audit: AuditService,
  ofRecordings: Pick<
    RecordingServices,
    'recordings' | 'readStoredAudio' | 'candidates' | 'runs' | 'uploadFolder'
  >,
): MarkingServices {
  const { recordings, readStoredAudio, candidates, runs, uploadFolder: folder } = ofRecordings;
  const schemes = createSchemesService(ground);
  const passes = createPassesService({ ...ground, audit, schemes });
  const coverage = createCoverageService(ground);
  const guard = createGuardService({ ...ground, audit });
  const marking = createMarkingService({ ...ground, recordings, guard, readStoredAudio });
  const events = createEventsService({ ...ground, audit, passes, schemes, recordings: marking });
  const rounded = { ...ground, audit, passes, candidates, events };
  const rounds = createRoundsService({ ...rounded, orders: createOrders(ground) });
  const answers = createAnswersService(rounded);
  const traces = createTracesService({ ...ground, audit, runs, passes, folder });
  const tracePoints = createTracePointsService({ ...ground, runs, passes });
  const reviews = createReviewsService({ ...ground, audit, guard });
  const collecting = createCollectingService(ground);
  const collections = createCollectionsService({ ...ground, audit, recordings: collecting });
  const plan = createReleasePlan({ ...ground, collections, schemes });
  const releases = createReleasesService({ ...ground, audit, collections, plan });
  const archivePool = createArchivePool(ground);
  const home = createHomeService(ground);
  return {
    schemes,
    passes,
    coverage,
    events,
    rounds,
    answers,
    traces,
    tracePoints,
    guard,
    reviews,
    collections,
    releases,
    archivePool,
    home,
  };
}

function createOrders({ db, onStop }: Ground): RoundOrders {
  const pool = createWorkerPool<CandidateDescriptors, LookAlikeGroup[]>({
    module: lookAlikesWorkerModule,
    workers: 1,
  });
  onStop(() => pool.close());
  return createRoundOrders(db, (descriptors) => findLookAlikesIn(pool, descriptors));
}

/** One archive at a time: building is bound by the disk. */
function createArchivePool({ onStop }: Ground): ArchivePool {
  const pool = createWorkerPool<ArchiveTask, BuiltArchive>({ module: archiveWorkerModule, workers: 1 });
  onStop(() => pool.close());
  return pool;
}
