import { and, asc, count, eq, isNull, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { growthPhases } from '../../db/schema/beside-sound.ts';
import { passes } from '../../db/schema/events.ts';
import { recordings } from '../../db/schema/recordings.ts';

export type PhaseRow = typeof growthPhases.$inferSelect;

/** A phase with the state of the pass it was marked in; `null` where the lab told it. */
export interface PhaseView {
  phase: PhaseRow;
  passState: (typeof passes.$inferSelect)['state'] | null;
}

export function selectPhases(db: Reader, runId: string): PhaseView[] {
  return db
    .select({ phase: growthPhases, passState: passes.state })
    .from(growthPhases)
    .leftJoin(passes, eq(passes.id, growthPhases.passId))
    .where(and(eq(growthPhases.runId, runId), isNull(growthPhases.deletedAtMs)))
    .orderBy(asc(growthPhases.startNs), asc(growthPhases.endNs), asc(growthPhases.id))
    .all();
}

export function selectPhase(db: Reader, id: string): PhaseView | undefined {
  return db
    .select({ phase: growthPhases, passState: passes.state })
    .from(growthPhases)
    .leftJoin(passes, eq(passes.id, growthPhases.passId))
    .where(eq(growthPhases.id, id))
    .get();
}

export function countPhases(db: Reader, runId: string): number {
  const row = db
    .select({ phases: count() })
    .from(growthPhases)
    .where(and(eq(growthPhases.runId, runId), isNull(growthPhases.deletedAtMs)))
    .get();
  return row?.phases ?? 0;
}

/** Open passes of a person on recordings of the run, as long as these are shared. */
export function selectOpenPassesOnRun(db: Reader, runId: string, labelerId: string) {
  return db
    .select({ id: passes.id, recordingId: passes.recordingId, task: passes.task, blind: passes.blind })
    .from(passes)
    .innerJoin(recordings, eq(recordings.id, passes.recordingId))
    .where(and(eq(recordings.runId, runId), eq(passes.labelerId, labelerId), eq(passes.state, 'assigned')))
    .orderBy(asc(passes.id))
    .all();
}

export function selectHasRecordings(db: Reader, runId: string, visible: SQL): boolean {
  const row = db
    .select({ id: recordings.id })
    .from(recordings)
    .where(and(eq(recordings.runId, runId), visible))
    .limit(1)
    .get();
  return row !== undefined;
}

export function insertPhase(db: Reader, row: PhaseRow): void {
  db.insert(growthPhases).values(row).run();
}

/** Changes the row only if it still has the revision that was looked at. */
export function updatePhase(db: Reader, row: PhaseRow, fromRevision: number): boolean {
  const { id, ...values } = row;
  return (
    db
      .update(growthPhases)
      .set(values)
      .where(and(eq(growthPhases.id, id), eq(growthPhases.revision, fromRevision)))
      .run().changes === 1
  );
}
