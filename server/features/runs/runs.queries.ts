import { and, asc, desc, eq, gt, lt, or, sql, type SQL } from 'drizzle-orm';
import { countLimit } from '../../../shared/contract/page.ts';
import type { ListRunsQuery, SaveRun } from '../../../shared/contract/runs.ts';
import type { Reader } from '../../db/client.ts';
import { containsText } from '../../db/like-pattern.ts';
import { labs } from '../../db/schema/labs.ts';
import { recordings } from '../../db/schema/recordings.ts';
import { runs } from '../../db/schema/runs.ts';
import type { RowPlace } from '../../db/row-place.ts';

export type RunRow = typeof runs.$inferSelect;
export interface RunView {
  run: RunRow;
  labName: string;
  recordingCount: number;
}

/** What the asking person may see, as conditions on `runs` and on `recordings`. */
export interface RunScope {
  visibleRuns: SQL;
  visibleRecordings: SQL;
}

function viewColumns(visibleRecordings: SQL) {
  const recordingCount = sql<number>`(
    select count(*) from ${recordings} where ${recordings.runId} = ${runs.id} and ${visibleRecordings}
  )`;
  return { run: runs, labName: labs.name, recordingCount };
}

export function selectRun(db: Reader, id: string, scope: RunScope): RunView | undefined {
  return db
    .select(viewColumns(scope.visibleRecordings))
    .from(runs)
    .innerJoin(labs, eq(labs.id, runs.labId))
    .where(and(eq(runs.id, id), scope.visibleRuns))
    .get();
}

export type RunFilters = Omit<ListRunsQuery, 'cursor' | 'limit' | 'sort'>;

function matching(filters: RunFilters, scope: RunScope): SQL | undefined {
  const { q, labId, material, process, kind } = filters;
  return and(
    scope.visibleRuns,
    q ? matchesText(q) : undefined,
    labId ? eq(runs.labId, labId) : undefined,
    material ? containsText(runs.material, material) : undefined,
    process ? eq(runs.process, process) : undefined,
    kind ? eq(runs.kind, kind) : undefined,
  );
}

function matchesText(text: string): SQL | undefined {
  const columns = [runs.title, runs.material, runs.composition, runs.specimen, runs.notes, labs.name];
  return or(...columns.map((column) => containsText(column, text)));
}

const orders = {
  newest: { by: desc, past: lt, key: runs.createdAtMs },
  oldest: { by: asc, past: gt, key: runs.createdAtMs },
  title: { by: asc, past: gt, key: runs.title },
} as const;

interface RunsSlice {
  filters: RunFilters;
  scope: RunScope;
  sort: ListRunsQuery['sort'];
  after: RowPlace | null;
  limit: number;
}

export function selectRuns(db: Reader, { filters, scope, sort, after, limit }: RunsSlice): RunView[] {
  const { by, past, key } = orders[sort];
  const rest = after ? or(past(key, after.key), and(eq(key, after.key), past(runs.id, after.id))) : undefined;
  return db
    .select(viewColumns(scope.visibleRecordings))
    .from(runs)
    .innerJoin(labs, eq(labs.id, runs.labId))
    .where(and(matching(filters, scope), rest))
    .orderBy(by(key), by(runs.id))
    .limit(limit)
    .all();
}

/** Counts one row further than is told, so that "more than" is known. */
export function countRuns(db: Reader, filters: RunFilters, scope: RunScope): number {
  const limited = db
    .select({ one: sql`1`.as('one') })
    .from(runs)
    .innerJoin(labs, eq(labs.id, runs.labId))
    .where(matching(filters, scope))
    .limit(countLimit + 1)
    .as('limited');
  return (
    db
      .select({ count: sql<number>`count(*)` })
      .from(limited)
      .get()?.count ?? 0
  );
}

export function insertRun(db: Reader, row: typeof runs.$inferInsert): void {
  db.insert(runs).values(row).run();
}

/** False where somebody else has changed the row since `revision`. */
export function updateRun(
  db: Reader,
  id: string,
  revision: number,
  values: RunValues & { updatedAtMs: number },
) {
  const changed = db
    .update(runs)
    .set({ ...values, revision: revision + 1 })
    .where(and(eq(runs.id, id), eq(runs.revision, revision)))
    .run();
  return changed.changes === 1;
}

export type RunValues = Omit<SaveRun, 'labId' | 'startedAt'> & { startedAtMs: number | null };
