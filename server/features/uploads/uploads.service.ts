import type { CreateUpload, Upload } from '../../../shared/contract/uploads.ts';
import { labsWhere, type Actor } from '../../../shared/policy/actor.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, forbidden, invalidField } from '../../http/problem.ts';
import type { RunsService } from '../runs/runs.service.ts';
import type { SensorsService } from '../sensors/sensors.service.ts';
import type { CompletionService } from './completion.service.ts';
import { requireOpen, requireOwnUpload } from './upload-access.ts';
import type { UploadFolder } from './upload-folder.ts';
import { toUpload, toUploadValues } from './uploads.map.ts';
import {
  closeUpload,
  countOpenUploads,
  insertUpload,
  selectOpenUploads,
  selectUpload,
  sumOpenBytes,
  updateUpload,
  type UploadRow,
} from './uploads.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids'> & {
  runs: RunsService;
  sensors: SensorsService;
  completion: CompletionService;
  folder: UploadFolder;
};

export const mostOpenUploads = 20;
const uploadLifeMs = 7 * 24 * 60 * 60_000;

export type UploadsService = ReturnType<typeof createUploadsService>;

/** Uploads that go on after a lost connection, a reload, or the next day. */
export function createUploadsService({ db, clock, ids, runs, sensors, completion, folder }: Parts) {
  async function create(actor: Actor, input: CreateUpload): Promise<{ id: string }> {
    requireContributor(actor);
    // Everything that was promised counts, so that files let in together cannot fill the disk together.
    const promisedBytes = Math.max(0, sumOpenBytes(db) - (await folder.heldBytes()));
    await folder.requireRoom(promisedBytes + input.sizeBytes);
    const id = ids.next();
    write(db, (tx) => {
      const run = runs.findOwn(tx, actor, input.runId);
      if (run === undefined) throw invalidField('runId', 'is not a run of a lab that you contribute to');
      sensors.requireSetupOfLab(tx, input.setupId, run.labId);
      requireQuota(countOpenUploads(tx, actor.id));
      const now = clock.nowMs();
      const stamps = {
        id,
        labId: run.labId,
        ownerId: actor.id,
        createdAtMs: now,
        expiresAtMs: now + uploadLifeMs,
      };
      insertUpload(tx, { ...toUploadValues(input), ...stamps, state: 'open' });
    });
    return { id };
  }

  async function listOpen(actor: Actor): Promise<{ items: Upload[] }> {
    const views = selectOpenUploads(db, actor.id);
    const toItem = async (view: (typeof views)[number]) =>
      toUpload(view, await folder.receivedBytes(view.upload.id));
    return { items: await Promise.all(views.map(toItem)) };
  }

  async function cancel(actor: Actor, id: string): Promise<void> {
    const upload = requireOwnUpload(db, actor, id);
    if (upload.state === 'cancelled') return;
    requireNotRunning(id);
    if (!write(db, (tx) => closeUpload(tx, id, 'cancelled')))
      throw conflict(`This upload is ${upload.state} already.`);
    await folder.remove(id);
  }

  /** At every request for bytes: the upload is this person's own, and still open. */
  function requireOpenOwn(actor: Actor, id: string): UploadRow {
    const upload = requireOwnUpload(db, actor, id);
    requireOpen(upload);
    requireNotRunning(id);
    return upload;
  }

  function requireNotRunning(id: string): void {
    if (completion.isRunning(id)) throw conflict('The bytes have all arrived and are being taken in.');
  }

  /** Each sign of life gives the upload its full time again. */
  function keepAlive(id: string): void {
    updateUpload(db, id, { streamId: id, expiresAtMs: clock.nowMs() + uploadLifeMs });
  }

  /** What the byte protocol may know of an upload; rights were checked before. */
  function findStream(id: string): { sizeBytes: number; createdAtMs: number } | undefined {
    const upload = selectUpload(db, id);
    return upload?.state === 'open' && upload.streamId === id ? upload : undefined;
  }

  return { create, listOpen, cancel, requireOpenOwn, keepAlive, findStream };
}

function requireContributor(actor: Actor): void {
  if (labsWhere(actor, 'contributor').length > 0) return;
  throw forbidden('Only the contributors of a lab may bring in recordings.');
}

function requireQuota(openUploads: number): void {
  if (openUploads < mostOpenUploads) return;
  throw conflict(
    `You have ${openUploads} uploads open. Let one finish, or cancel one, before you begin another.`,
  );
}
