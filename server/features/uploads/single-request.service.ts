import type { Recording } from '../../../shared/contract/recordings.ts';
import type { Declaration } from '../../../shared/contract/uploads.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Ground } from '../../ground.ts';
import { forbidden } from '../../http/problem.ts';
import type { RecordingsService } from '../recordings/recordings.service.ts';
import type { RunsService } from '../runs/runs.service.ts';
import type { SensorsService } from '../sensors/sensors.service.ts';
import type { IntakeService } from './intake.service.ts';
import type { UploadFolder } from './upload-folder.ts';
import { plainFileName } from './plain-file-name.ts';
import { plainCamera } from './uploads.map.ts';

type Parts = Pick<Ground, 'db' | 'ids'> & {
  runs: RunsService;
  sensors: SensorsService;
  recordings: RecordingsService;
  intake: IntakeService;
  folder: UploadFolder;
};

/** A whole file that lies at the place that `admit` gave. */
export interface BroughtFile {
  path: string;
  fileName: string;
  sizeBytes: number;
  sha256?: string | undefined;
  declaration: Declaration;
}

export type SingleRequestService = ReturnType<typeof createSingleRequestService>;

/** Files that come with everything told about them in one request. */
export function createSingleRequestService({ db, ids, runs, sensors, recordings, intake, folder }: Parts) {
  /** Before the bytes are read: the run must be one that the person may add to, and there must be room. */
  async function admit(
    actor: Actor,
    runId: string,
    announcedBytes: number,
  ): Promise<{ name: string; path: string }> {
    requireRun(actor, runId);
    await folder.requireRoom(announcedBytes);
    const name = `form-${ids.next()}`;
    return { name, path: folder.pathOf(name) };
  }

  async function bringIn(actor: Actor, runId: string, file: BroughtFile): Promise<Recording> {
    const { path, sizeBytes, sha256, declaration } = file;
    const run = requireRun(actor, runId);
    sensors.requireSetupOfLab(db, declaration.setupId, run.labId);
    const facts = {
      run,
      uploadedById: actor.id,
      path,
      sizeBytes,
      sha256,
      fileName: plainFileName(file.fileName),
      camera: plainCamera(declaration.camera),
    };
    const recordingId = await intake.bringIn({ ...declaration, ...facts }, () => undefined);
    return recordings.get(actor, recordingId);
  }

  function requireRun(actor: Actor, runId: string): { id: string; labId: string } {
    runs.get(actor, runId);
    const run = runs.findOwn(db, actor, runId);
    if (run === undefined) throw forbidden('Only the contributors of its lab may add recordings to a run.');
    return run;
  }

  return { admit, bringIn, remove: folder.remove };
}
