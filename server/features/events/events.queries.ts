import { and, asc, eq, inArray, isNull, sql } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { prepared } from '../../db/prepared.ts';
import { eventRevisions, events } from '../../db/schema/events.ts';
import { candidates, detectorRuns } from '../../db/schema/measurements.ts';

export type EventRow = typeof events.$inferSelect;

const eventById = prepared((db) =>
  db
    .select()
    .from(events)
    .where(eq(events.id, sql.placeholder('id')))
    .prepare(),
);

export function selectEvent(db: Reader, id: string): EventRow | undefined {
  return eventById(db).get({ id });
}

export function selectEventsOfPasses(db: Reader, passIds: readonly string[]): EventRow[] {
  return db
    .select()
    .from(events)
    .where(and(inArray(events.passId, [...passIds]), isNull(events.deletedAtMs)))
    .orderBy(asc(events.startSample), asc(events.id))
    .all();
}

export function insertEvent(db: Reader, row: EventRow): void {
  db.insert(events).values(row).run();
}

/** Changes the row only if it still has the revision that was looked at. */
export function updateEvent(db: Reader, row: EventRow, fromRevision: number): boolean {
  const { id, ...values } = row;
  return (
    db
      .update(events)
      .set(values)
      .where(and(eq(events.id, id), eq(events.revision, fromRevision)))
      .run().changes === 1
  );
}

export function insertEventRevision(db: Reader, row: typeof eventRevisions.$inferInsert): void {
  db.insert(eventRevisions).values(row).run();
}

/** The candidate, if a detector proposed it in this recording. */
export function selectCandidateOf(db: Reader, recordingId: string, candidateId: string) {
  return db
    .select({ id: candidates.id })
    .from(candidates)
    .innerJoin(detectorRuns, eq(detectorRuns.id, candidates.detectorRunId))
    .where(and(eq(candidates.id, candidateId), eq(detectorRuns.recordingId, recordingId)))
    .get();
}
