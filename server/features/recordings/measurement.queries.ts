import { and, eq, inArray, isNull } from 'drizzle-orm';
import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import type { Db, Reader } from '../../db/client.ts';
import { candidates, detectorRuns, measurements } from '../../db/schema/measurements.ts';

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

/** Makes a measurement the one that is shown; those before stay, as marks may have come from their candidates. */
export function finishMeasurement(db: Reader, measurementId: string, finishedAtMs: number): void {
  db.update(measurements).set({ finishedAtMs }).where(eq(measurements.id, measurementId)).run();
}

/** Removes what an interrupted try left. */
export function deleteUnfinishedMeasurements(db: Reader, recordingId: string): void {
  const unfinished = db
    .select({ id: measurements.id })
    .from(measurements)
    .where(and(eq(measurements.recordingId, recordingId), isNull(measurements.finishedAtMs)));
  const left = db
    .select({ id: detectorRuns.id })
    .from(detectorRuns)
    .where(inArray(detectorRuns.measurementId, unfinished));
  db.delete(candidates).where(inArray(candidates.detectorRunId, left)).run();
  db.delete(detectorRuns).where(inArray(detectorRuns.measurementId, unfinished)).run();
  db.delete(measurements).where(inArray(measurements.id, unfinished)).run();
}
