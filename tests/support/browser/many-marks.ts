import path from 'node:path';
import { openDatabase } from '../../../server/db/client.ts';
import { write } from '../../../server/db/transaction.ts';
import { insertEvent } from '../../../server/features/events/events.queries.ts';
import { systemClock, systemIds } from '../../../server/services/clock.ts';

export interface ManyMarks {
  recordingId: string;
  passId: string;
  labelerId: string;
  frames: number;
  count: number;
}

const SPAN_SAMPLES = 200;

/** Puts many marks into an open pass, evenly over the recording, while the server runs. */
export function seedManyMarks(
  dataDir: string,
  { recordingId, passId, labelerId, frames, count }: ManyMarks,
): void {
  const db = openDatabase(path.join(dataDir, 'db', 'recalesce.sqlite'));
  const nowMs = systemClock.nowMs();
  const step = Math.floor((frames - 2 * SPAN_SAMPLES) / count);
  try {
    write(db, (tx) => {
      for (let index = 0; index < count; index++) {
        const startSample = SPAN_SAMPLES + index * step;
        insertEvent(tx, {
          ...{ id: systemIds.next(), recordingId, passId, createdById: labelerId },
          ...{ channel: 0, startSample, endSample: startSample + Math.min(step, SPAN_SAMPLES) },
          ...{
            lowHz: null,
            highHz: null,
            classKey: index % 5 === 0 ? 'bubble' : 'crack',
            confidence: 'sure',
          },
          ...{ note: '', origin: 'hand', candidateId: null, parameters: null },
          ...{ rawStartSample: null, uncertaintySamples: null, aids: null, view: null },
          ...{ createdAtMs: nowMs, updatedAtMs: nowMs, deletedAtMs: null, revision: 1 },
        });
      }
    });
  } finally {
    db.$client.close();
  }
}
