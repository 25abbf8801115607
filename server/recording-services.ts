import type { AuditService } from './features/audit/audit.service.ts';
import { createCandidatesService, type CandidatesService } from './features/recordings/candidates.service.ts';
import { createListeningService, type ListeningService } from './features/recordings/listening.service.ts';
import {
  createMeasuringRequestsService,
  type MeasuringRequestsService,
} from './features/recordings/measuring-requests.service.ts';
import { createMeasuringService, type MeasuringService } from './features/recordings/measuring.service.ts';
import { createOnsetsService, type OnsetsService } from './features/recordings/onsets.service.ts';
import {
  createRecordingViewsService,
  type RecordingViewsService,
} from './features/recordings/recording-views.service.ts';
import { createRecordingsService, type RecordingsService } from './features/recordings/recordings.service.ts';
import { createRegionsService, type RegionsService } from './features/recordings/regions.service.ts';
import { createStoredAudioReader, type StoredAudioReader } from './features/recordings/stored-audio.ts';
import { createWorkingCopies } from './features/recordings/working-copies.ts';
import { createViewFolders } from './features/recordings/view-folders.ts';
import { createRunsService, type RunsService } from './features/runs/runs.service.ts';
import { createSensorsService, type SensorsService } from './features/sensors/sensors.service.ts';
import { createCompletionService, type CompletionService } from './features/uploads/completion.service.ts';
import { createIntakeService, type IntakeService } from './features/uploads/intake.service.ts';
import {
  createSingleRequestService,
  type SingleRequestService,
} from './features/uploads/single-request.service.ts';
import { createUploadFolder, type UploadFolder } from './features/uploads/upload-folder.ts';
import {
  createUploadSweepService,
  type UploadSweepService,
} from './features/uploads/upload-sweep.service.ts';
import { createUploadsService, type UploadsService } from './features/uploads/uploads.service.ts';
import type { Ground } from './ground.ts';
import { importInWorker, importWorkerModule } from './importing/import-in-worker.ts';
import type { ImportOutcome, ImportTask } from './importing/import.worker.ts';
import { createWorkerPool } from './jobs/worker-pool.ts';
import type { MeasureResult } from './measuring/join-segments.ts';
import { measureInWorkers, measureWorkerModule } from './measuring/measure-in-workers.ts';
import type { MeasureTask } from './measuring/measure.worker.ts';

/** Everything from the run to the measured recording. */
export interface RecordingServices {
  runs: RunsService;
  sensors: SensorsService;
  recordings: RecordingsService;
  recordingViews: RecordingViewsService;
  candidates: CandidatesService;
  listening: ListeningService;
  regions: RegionsService;
  onsets: OnsetsService;
  measuring: MeasuringService;
  measuringRequests: MeasuringRequestsService;
  /** Header and path of stored audio, for whoever measures on it. */
  readStoredAudio: StoredAudioReader;
  intake: IntakeService;
  uploadFolder: UploadFolder;
  completion: CompletionService;
  uploads: UploadsService;
  singleRequest: SingleRequestService;
  uploadSweep: UploadSweepService;
}

export function createRecordingServices(ground: Ground, audit: AuditService): RecordingServices {
  const { config, store } = ground;
  const runs = createRunsService({ ...ground, audit });
  const sensors = createSensorsService({ ...ground, audit });
  const recordings = createRecordingsService({ ...ground, audit });
  const viewFolders = createViewFolders(config.paths.views);
  const workingCopies = createWorkingCopies({
    folder: config.paths.working,
    importRecording: createImportRecording(ground),
  });
  const readStoredAudio = createStoredAudioReader(store, workingCopies);
  const recordingViews = createRecordingViewsService({ ...ground, recordings, viewFolders, readStoredAudio });
  const candidates = createCandidatesService({ ...ground, recordingViews });
  const listening = createListeningService({ recordingViews, readStoredAudio });
  const regions = createRegionsService({ recordingViews, readStoredAudio });
  const onsets = createOnsetsService({ ...ground, recordingViews, readStoredAudio });
  const measureFile = createMeasureFile(ground);
  const measuring = createMeasuringService({ ...ground, audit, viewFolders, readStoredAudio, measureFile });
  const measuringRequests = createMeasuringRequestsService({ ...ground, audit, recordings });
  const intake = createIntakeService({ ...ground, recordings, sensors });
  const uploadFolder = createUploadFolder({ folder: config.paths.uploads });
  const completion = createCompletionService({ ...ground, audit, recordings, intake, folder: uploadFolder });
  const uploads = createUploadsService({ ...ground, runs, sensors, completion, folder: uploadFolder });
  const single = { ...ground, runs, sensors, recordings, intake, folder: uploadFolder };
  const singleRequest = createSingleRequestService(single);
  const uploadSweep = createUploadSweepService({ ...ground, completion, folder: uploadFolder });
  const ofRecordings = {
    recordings,
    recordingViews,
    candidates,
    listening,
    regions,
    onsets,
    measuring,
    measuringRequests,
    readStoredAudio,
  };
  const ofUploads = { intake, uploadFolder, completion, uploads, singleRequest, uploadSweep };
  return { runs, sensors, ...ofRecordings, ...ofUploads };
}

function createMeasureFile({
  config,
  onStop,
}: Ground): Parameters<typeof createMeasuringService>[0]['measureFile'] {
  const pool = createWorkerPool<MeasureTask, MeasureResult | null>({
    module: measureWorkerModule,
    workers: config.measureWorkers,
  });
  onStop(() => pool.close());
  return (input, controls) => measureInWorkers(pool, config.measureWorkers, input, controls);
}

function createImportRecording({
  onStop,
}: Ground): Parameters<typeof createWorkingCopies>[0]['importRecording'] {
  const pool = createWorkerPool<ImportTask, ImportOutcome>({ module: importWorkerModule, workers: 1 });
  onStop(() => pool.close());
  return (input, controls) => importInWorker(pool, input, controls);
}
