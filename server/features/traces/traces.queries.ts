import { and, asc, eq, isNotNull, isNull, type SQL } from 'drizzle-orm';
import type { Reader } from '../../db/client.ts';
import { conditionTraces } from '../../db/schema/beside-sound.ts';
import { runs } from '../../db/schema/runs.ts';

export type TraceRow = typeof conditionTraces.$inferSelect;
export interface TraceView {
  trace: TraceRow;
  labId: string;
}

const view = { trace: conditionTraces, labId: runs.labId };

export function selectTraces(db: Reader, runId: string): TraceView[] {
  return db
    .select(view)
    .from(conditionTraces)
    .innerJoin(runs, eq(runs.id, conditionTraces.runId))
    .where(and(eq(conditionTraces.runId, runId), isNull(conditionTraces.deletedAtMs)))
    .orderBy(asc(conditionTraces.createdAtMs), asc(conditionTraces.id))
    .all();
}

/** A trace whose run the asking person may see; `deleted` asks for one that was taken away. */
export function selectTrace(
  db: Reader,
  id: string,
  { visibleRuns, deleted = false }: { visibleRuns: SQL; deleted?: boolean },
): TraceView | undefined {
  const isThere = (deleted ? isNotNull : isNull)(conditionTraces.deletedAtMs);
  return db
    .select(view)
    .from(conditionTraces)
    .innerJoin(runs, eq(runs.id, conditionTraces.runId))
    .where(and(eq(conditionTraces.id, id), isThere, visibleRuns))
    .get();
}

export function insertTrace(db: Reader, row: typeof conditionTraces.$inferInsert): void {
  db.insert(conditionTraces).values(row).run();
}

type Change = Partial<
  Pick<TraceRow, 'name' | 'quantity' | 'unit' | 'runOffsetNs' | 'clockPpm' | 'deletedAtMs'>
> & { updatedAtMs: number };

/** The row moves on by one revision; the transaction has checked which one it was. */
export function updateTrace(db: Reader, { id, revision }: TraceRow, change: Change): void {
  db.update(conditionTraces)
    .set({ ...change, revision: revision + 1 })
    .where(and(eq(conditionTraces.id, id), eq(conditionTraces.revision, revision)))
    .run();
}
