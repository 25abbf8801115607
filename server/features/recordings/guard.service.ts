import type { GuardFinding, Sharing } from '../../../shared/contract/recordings.ts';
import type { Tx } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { announceRecording } from './recording-activity.ts';
import { insertFindings, selectRecordingRow, updateRecording } from './recordings.queries.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'ids' | 'activity'> & { audit: AuditService };

export type GuardService = ReturnType<typeof createGuardService>;

/** Moves a recording along its axis of sharing; who may do so is the caller's to have asked. */
export function createGuardService({ db, clock, ids, activity, audit }: Parts) {
  /** Something was found after sharing: the recording and all that was made from it wait for a reviewer again. */
  function hold(
    tx: Tx,
    recordingId: string,
    finding: Pick<GuardFinding, 'kind' | 'sentence' | 'place'>,
  ): void {
    const row = selectRecordingRow(tx, recordingId);
    if (!row) throw notFound('This recording');
    const nowMs = clock.nowMs();
    insertFindings(tx, [{ ...finding, id: ids.next(), recordingId, foundAtMs: nowMs }]);
    if (row.sharing === 'held') return;
    updateRecording(tx, recordingId, { sharing: 'held', heldAtMs: nowMs, updatedAtMs: nowMs });
    audit.record(tx, {
      personId: null,
      action: 'recording.held',
      subjectType: 'Recording',
      subjectId: recordingId,
      labId: row.labId,
      detail: { finding: finding.kind, from: row.sharing },
    });
  }

  function share(tx: Tx, recordingId: string, sharing: Sharing): void {
    updateRecording(tx, recordingId, { sharing, updatedAtMs: clock.nowMs() });
  }

  function announce(recordingId: string): void {
    const row = selectRecordingRow(db, recordingId);
    if (row) announceRecording(activity, row);
  }

  return { hold, share, announce };
}
