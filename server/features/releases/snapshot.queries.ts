import { and, asc, eq, inArray, isNull, max } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { collectionItems, collectionLabelers } from '../../db/schema/collections.ts';
import { events, passes } from '../../db/schema/events.ts';
import { labs } from '../../db/schema/labs.ts';
import { detectorRuns, measurements } from '../../db/schema/measurements.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import { sensors, setups } from '../../db/schema/sensors.ts';

/** Everything about the members of a collection that goes into a snapshot, in the order of their ids. */
export function selectMemberFacts(db: Reader, collectionId: string) {
  return db
    .select({ recording: recordings, run: runs, labName: labs.name, setup: setups, sensor: sensors })
    .from(collectionItems)
    .innerJoin(recordings, eq(recordings.id, collectionItems.recordingId))
    .innerJoin(runs, eq(runs.id, recordings.runId))
    .innerJoin(labs, eq(labs.id, recordings.labId))
    .innerJoin(setups, eq(setups.id, recordings.setupId))
    .innerJoin(sensors, eq(sensors.id, setups.sensorId))
    .where(eq(collectionItems.collectionId, collectionId))
    .orderBy(asc(recordings.id))
    .all();
}
export type MemberFacts = ReturnType<typeof selectMemberFacts>[number];

/** The newest measurement of a recording, with the run of the detector that belongs to it. */
export function selectMeasured(db: Reader, recordingId: string) {
  return db
    .select({ measurement: measurements, detectorVersion: detectorRuns.detectorVersion })
    .from(measurements)
    .innerJoin(detectorRuns, eq(detectorRuns.measurementId, measurements.id))
    .where(eq(measurements.recordingId, recordingId))
    .orderBy(measurements.createdAtMs, measurements.id)
    .all()
    .at(-1);
}
export type Measured = NonNullable<ReturnType<typeof selectMeasured>>;

export function selectFinishedPasses(db: Reader, collectionId: string) {
  return db
    .select({ pass: passes })
    .from(passes)
    .innerJoin(collectionItems, eq(collectionItems.recordingId, passes.recordingId))
    .where(and(eq(collectionItems.collectionId, collectionId), eq(passes.state, 'finished')))
    .orderBy(asc(passes.id))
    .all()
    .map((row) => row.pass);
}
export type FinishedPass = ReturnType<typeof selectFinishedPasses>[number];

/** Marks of the passes given, in the order of their ids. */
export function selectMarks(db: Reader, passIds: readonly string[]) {
  return db
    .select()
    .from(events)
    .where(and(inArray(events.passId, [...passIds]), isNull(events.deletedAtMs)))
    .orderBy(asc(events.id))
    .all();
}
export type Mark = ReturnType<typeof selectMarks>[number];

export function selectLabelerNumbers(db: Reader, collectionId: string): Map<string, number> {
  const rows = db
    .select()
    .from(collectionLabelers)
    .where(eq(collectionLabelers.collectionId, collectionId))
    .all();
  return new Map(rows.map((row) => [row.labelerId, row.ordinal]));
}

export function insertLabelerNumbers(db: Reader, rows: (typeof collectionLabelers.$inferInsert)[]): void {
  if (rows.length > 0) db.insert(collectionLabelers).values(rows).run();
}

export function selectHighestLabelerNumber(db: Reader, collectionId: string): number {
  const row = db
    .select({ highest: max(collectionLabelers.ordinal) })
    .from(collectionLabelers)
    .where(eq(collectionLabelers.collectionId, collectionId))
    .get();
  return row?.highest ?? 0;
}
