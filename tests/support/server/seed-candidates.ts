import type { DetectedCandidate } from '../../../shared/contract/measurement.ts';
import { eq } from 'drizzle-orm';
import { candidates, detectorRuns } from '../../../server/db/schema/measurements.ts';
import { insertCandidates } from '../../../server/features/recordings/measurement.queries.ts';
import type { TestApp } from './test-app.ts';

export function detectedCandidate(facts: Partial<DetectedCandidate> = {}): DetectedCandidate {
  return {
    onsetSample: 100,
    endSample: 200,
    peakSample: 120,
    onsetUncertaintyUs: 5,
    peakDb: -20,
    peakDbAe: null,
    riseTimeUs: 100,
    durationUs: 1000,
    counts: 12,
    energyFs2S: 1e-6,
    energyV2S: null,
    rmsDb: -30,
    averageFrequencyHz: 30_000,
    raMsPerV: null,
    peakFrequencyHz: 30_000,
    centroidHz: 31_000,
    ultrasonicShare: 0.9,
    hearingClass: 'above',
    snrDb: 20,
    clipped: false,
    bandLowHz: 20_000,
    bandHighHz: 45_000,
    channel: 0,
    channels: [0],
    ...facts,
  };
}

/** Puts these in the place of whatever the detector has found. */
export function replaceCandidates(app: TestApp, recordingId: string, found: DetectedCandidate[]): void {
  const { db, ids } = app.deps;
  const run = db.select().from(detectorRuns).where(eq(detectorRuns.recordingId, recordingId)).get();
  if (run === undefined) throw new RangeError('The recording is not measured.');
  db.delete(candidates).where(eq(candidates.detectorRunId, run.id)).run();
  db.update(detectorRuns).set({ candidateCount: found.length }).where(eq(detectorRuns.id, run.id)).run();
  const rows = found.map((parameters, ordinal) => ({ id: ids.next(), ordinal, parameters }));
  insertCandidates(db, run.id, rows);
}
