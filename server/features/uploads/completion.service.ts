import type { Recording } from '../../../shared/contract/recordings.ts';
import { formatBytes } from '../../../shared/lib/format-bytes.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError, conflict } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { RecordingsService } from '../recordings/recordings.service.ts';
import type { IntakeService } from './intake.service.ts';
import { requireOpen, requireOwnUpload } from './upload-access.ts';
import type { UploadFolder } from './upload-folder.ts';
import { closeUpload, type UploadRow } from './uploads.queries.ts';

type Parts = Pick<Ground, 'db'> & {
  audit: AuditService;
  recordings: RecordingsService;
  intake: IntakeService;
  folder: UploadFolder;
};

export type CompletionService = ReturnType<typeof createCompletionService>;

/** Turns an upload whose bytes have all arrived into a recording. */
export function createCompletionService({ db, audit, recordings, intake, folder }: Parts) {
  const running = new Map<string, Promise<Recording>>();

  /** Idempotent: a lost answer is asked for again, and two calls at once share one run. */
  async function complete(actor: Actor, id: string, sha256?: string): Promise<Recording> {
    const upload = requireOwnUpload(db, actor, id);
    const present = running.get(id);
    if (present !== undefined) return present;
    if (upload.recordingId !== null) return recordings.get(actor, upload.recordingId);
    requireOpen(upload);
    const started = finish(actor, upload, sha256).finally(() => running.delete(id));
    running.set(id, started);
    return started;
  }

  async function finish(actor: Actor, upload: UploadRow, sha256: string | undefined): Promise<Recording> {
    const { id, runId, labId } = upload;
    try {
      await requireWhole(upload);
      const arrival = {
        ...upload,
        path: folder.pathOf(id),
        run: { id: runId, labId },
        uploadedById: actor.id,
        sha256,
      };
      const recordingId = await intake.bringIn(arrival, (tx, madeId) => {
        if (!closeUpload(tx, id, 'complete', madeId)) throw conflict('This upload is not open any more.');
      });
      await folder.remove(id);
      return recordings.get(actor, recordingId);
    } catch (error) {
      if (isRefusal(error)) await refuse(actor, upload, error);
      throw error;
    }
  }

  async function requireWhole({ id, sizeBytes }: UploadRow): Promise<void> {
    const received = await folder.receivedBytes(id);
    if (received === sizeBytes) return;
    throw conflict(
      `${formatBytes(received)} of ${formatBytes(sizeBytes)} have arrived; go on with the upload.`,
    );
  }

  /** A file that cannot be used leaves nothing behind but a line in the audit log. */
  async function refuse(
    actor: Actor,
    { id, labId, fileName }: UploadRow,
    { code }: ProblemError,
  ): Promise<void> {
    write(db, (tx) => {
      closeUpload(tx, id, 'cancelled');
      const subject = { subjectType: 'Upload', subjectId: id, labId };
      audit.record(tx, {
        personId: actor.id,
        action: 'upload.refused',
        ...subject,
        detail: { code, fileName },
      });
    });
    await folder.remove(id);
  }

  return { complete, isRunning: (id: string) => running.has(id) };
}

function isRefusal(error: unknown): error is ProblemError {
  return error instanceof ProblemError && ['file-refused', 'checksum-mismatch'].includes(error.code);
}
