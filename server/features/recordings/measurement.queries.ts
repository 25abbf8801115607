import { and, eq, inArray, ne } from 'drizzle-orm';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import type { Db, Reader } from '../../db/client.ts';
import { candidates, detectorRuns, measurements } from '../../db/schema/measurements.ts';
import { recordings } from '../../db/schema/recordings.ts';

export function insertMeasurement(db: Reader, row: typeof measurements.$inferInsert): void {
  db.insert(measurements).values(row).run();
}

export function insertDetectorRun(db: Reader, row: typeof detectorRuns.$inferInsert): void {
  db.insert(detectorRuns).values(row).run();
}

export interface NewCandidate {
  id: string;
  ordinal: number;
  parameters: DetectedCandidate;
}

const candidateColumns = [
  'id',
  'detector_run_id',
  'ordinal',
  'channel',
  'onset_sample',
  'end_sample',
  'peak_db',
  'hearing_class',
  'snr_db',
  'peak_frequency_hz',
  'duration_us',
  'energy_fs2_s',
  'ultrasonic_share',
  'parameters',
];

/** Through one prepared statement: built row by row, tens of thousands of candidates take ten times as long. */
export function insertCandidates(db: Db, detectorRunId: string, rows: readonly NewCandidate[]): void {
  const marks = candidateColumns.map(() => '?').join(', ');
  const statement = db.$client.prepare(
    `insert into candidates (${candidateColumns.join(', ')}) values (${marks})`,
  );
  for (const { id, ordinal, parameters } of rows) {
    const { channel, onsetSample, endSample, peakDb, hearingClass } = parameters;
    const { snrDb, peakFrequencyHz, durationUs, energyFs2S, ultrasonicShare } = parameters;
    const place = [channel, onsetSample, endSample, peakDb, hearingClass];
    const facts = [snrDb, peakFrequencyHz, durationUs, energyFs2S, ultrasonicShare];
    statement.run(id, detectorRunId, ordinal, ...place, ...facts, JSON.stringify(parameters));
  }
}

/** Removes what an interrupted try left; what belongs to a measured recording stays for good. */
export function deleteUnfinishedMeasurements(db: Reader, recordingId: string): void {
  const unmeasured = db
    .select({ id: recordings.id })
    .from(recordings)
    .where(and(eq(recordings.id, recordingId), ne(recordings.processing, 'measured')));
  const left = db
    .select({ id: detectorRuns.id })
    .from(detectorRuns)
    .where(inArray(detectorRuns.recordingId, unmeasured));
  db.delete(candidates).where(inArray(candidates.detectorRunId, left)).run();
  db.delete(detectorRuns).where(inArray(detectorRuns.recordingId, unmeasured)).run();
  db.delete(measurements).where(inArray(measurements.recordingId, unmeasured)).run();
}
