import type { Recording } from '../../../shared/contract/recordings.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { MEASURING_STOPPED } from '../../../shared/domain/recording-status.ts';
import { authorize } from '../../authorize/authorize.ts';
import { visibleRecordings } from '../../authorize/visible-recordings.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { conflict, notFound } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import { announceRecording } from './recording-activity.ts';
import {
  requireRecording,
  selectRecordingRow,
  updateRecording,
  type RecordingRow,
} from './recordings.queries.ts';
import type { RecordingsService } from './recordings.service.ts';

type Parts = Pick<Ground, 'db' | 'clock' | 'jobs' | 'activity'> & {
  audit: AuditService;
  recordings: RecordingsService;
};

export type MeasuringRequestsService = ReturnType<typeof createMeasuringRequestsService>;

/** What people ask for about the measurement of a recording: to make it again, or to stop it. */
export function createMeasuringRequestsService({ db, clock, jobs, activity, audit, recordings }: Parts) {
  /** Another try after a failure or a stop; of what is measured, a new measurement that replaces it when it is finished. */
  function measureAgain(actor: Actor, id: string): Recording {
    return change(actor, id, (tx, found) => {
      if (isUnderway(found)) throw conflict('The recording is being measured already.');
      const again = found.processing === 'measured';
      const processing = again ? ('measured' as const) : ('queued' as const);
      updateRecording(tx, id, { processing, progress: 0, failure: null, updatedAtMs: clock.nowMs() });
      jobs.enqueue(tx, {
        kind: 'measure',
        payload: again ? { recordingId: id, again } : { recordingId: id },
      });
      return 'recording.measuring-retried';
    });
  }

  /** Ends a measurement that waits or runs. Its finished segments are kept, so that another try goes on from there. */
  function stop(actor: Actor, id: string): Recording {
    return change(actor, id, (tx, found) => {
      if (!isUnderway(found)) throw conflict('The recording is not being measured.');
      for (const payload of [{ recordingId: id }, { recordingId: id, again: true }]) {
        jobs.cancel(tx, { kind: 'measure', payload });
      }
      const state =
        found.processing === 'measured'
          ? ({ progress: 1 } as const)
          : ({ processing: 'failed', progress: 0, failure: MEASURING_STOPPED } as const);
      updateRecording(tx, id, { ...state, updatedAtMs: clock.nowMs() });
      return 'recording.measuring-stopped';
    });
  }

  function change(actor: Actor, id: string, make: (tx: Tx, found: RecordingRow) => string): Recording {
    const changed = write(db, (tx) => {
      const found = selectRecordingRow(tx, id, visibleRecordings(actor));
      if (found === undefined) throw notFound('This recording');
      const detail = 'Only the contributors of its lab decide about its measurement.';
      authorize(actor, { action: 'update', name: 'Recording', row: found, detail });
      const action = make(tx, found);
      const subject = { subjectType: 'Recording', subjectId: id, labId: found.labId };
      audit.record(tx, { personId: actor.id, action, ...subject, detail: {} });
      return requireRecording(tx, id);
    });
    announceRecording(activity, changed);
    return recordings.get(actor, id);
  }

  return { measureAgain, stop };
}

/** A recording that is measured once more stays measured meanwhile; only its progress is not complete. */
function isUnderway({ processing, progress }: RecordingRow): boolean {
  if (processing === 'measured') return progress < 1;
  return processing === 'queued' || processing === 'measuring';
}
