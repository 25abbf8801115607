import path from 'node:path';
import { eq } from 'drizzle-orm';
import type { DetectedCandidate, MeasurementSummary } from '../../../shared/contract/measurement.ts';
import { openDatabase } from '../../../server/db/client.ts';
import { measurements } from '../../../server/db/schema/measurements.ts';
import { systemClock, systemIds } from '../../../server/services/clock.ts';
import { manyCandidates, replaceCandidates } from '../server/seed-candidates.ts';

/** Puts many candidates beside what the detector found in a measured recording, while the server runs. */
export function seedManyCandidates(dataDir: string, recordingId: string, count: number): void {
  const db = openDatabase(path.join(dataDir, 'db', 'recalesce.sqlite'));
  try {
    const row = db.select().from(measurements).where(eq(measurements.recordingId, recordingId)).get();
    if (row === undefined) throw new RangeError('The recording is not measured.');
    const found = manyCandidates({ count, ...row.summary.format });
    replaceCandidates({ db, ids: systemIds, clock: systemClock }, recordingId, found);
    const summary = withCandidates(row.summary, found);
    db.update(measurements).set({ summary }).where(eq(measurements.id, row.id)).run();
  } finally {
    db.$client.close();
  }
}

function withCandidates(
  summary: MeasurementSummary,
  found: readonly DetectedCandidate[],
): MeasurementSummary {
  const { course, ultrasonic } = summary;
  const perStep = new Array<number>(course.levelDb.length).fill(0);
  const classes = { below: 0, across: 0, above: 0, unknown: 0 };
  for (const { onsetSample, hearingClass } of found) {
    perStep[Math.floor(onsetSample / course.samplesPerStep)]! += 1;
    classes[hearingClass]++;
  }
  const { below, across, above } = classes;
  const candidates = { ...ultrasonic.candidates, total: found.length, below, across, above };
  return {
    ...summary,
    course: { ...course, candidates: perStep },
    ultrasonic: { ...ultrasonic, verdict: 'found', candidates },
  };
}
