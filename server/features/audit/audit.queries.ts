import { and, count, desc, eq, lt, sql, type SQL } from 'drizzle-orm';
import type { Reader, Tx } from '../../db/client.ts';
import { auditLog } from '../../db/schema/audit-log.ts';
import { passes } from '../../db/schema/events.ts';
import { users } from '../../db/schema/users.ts';

export type AuditRow = typeof auditLog.$inferSelect;

export function selectLastAuditRow(tx: Tx): { sequence: number; hash: string } | undefined {
  return tx
    .select({ sequence: auditLog.sequence, hash: auditLog.hash })
    .from(auditLog)
    .orderBy(desc(auditLog.sequence))
    .limit(1)
    .get();
}

export function insertAuditRow(tx: Tx, row: typeof auditLog.$inferInsert): void {
  tx.insert(auditLog).values(row).run();
}

export interface AuditFilter {
  action?: string | undefined;
  subjectId?: string | undefined;
  personId?: string | undefined;
  /** Whoever marks a recording blind is not told what others did to its marks meanwhile. */
  markerId?: string | undefined;
}

/** Newest first, with the name the person has now. */
export function selectAuditRows(
  db: Reader,
  filter: AuditFilter,
  page: { beforeSequence: number | null; limit: number },
) {
  const before = page.beforeSequence === null ? undefined : lt(auditLog.sequence, page.beforeSequence);
  return db
    .select({ row: auditLog, personName: users.name })
    .from(auditLog)
    .leftJoin(users, eq(users.id, auditLog.personId))
    .where(and(...conditionsOf(filter), before))
    .orderBy(desc(auditLog.sequence))
    .limit(page.limit)
    .all();
}

export function countAuditRows(db: Reader, filter: AuditFilter): number {
  const found = db
    .select({ count: count() })
    .from(auditLog)
    .where(and(...conditionsOf(filter)))
    .get();
  return found?.count ?? 0;
}

export function selectAuditChain(db: Reader): AuditRow[] {
  return db.select().from(auditLog).orderBy(auditLog.sequence).all();
}

/** Rows of other people that name a recording, or a pass on it, which this person marks blind. */
function isOfBlindMarking(markerId: string): SQL {
  const named = (key: string) => sql`json_extract(${auditLog.detail}, ${`$.${key}`})`;
  return sql`${auditLog.subjectType} not in ('Recording', 'Pass') and ${auditLog.personId} is not ${markerId} and exists (
    select 1 from ${passes} where ${passes.labelerId} = ${markerId} and ${passes.state} = 'assigned' and ${passes.blind} = 1
    and ${passes.recordingId} = coalesce(${named('recordingId')}, (
      select named.recording_id from ${passes} as named where named.id = ${named('passId')}
    )))`;
}

function conditionsOf({ action, subjectId, personId, markerId }: AuditFilter): SQL[] {
  return [
    ...(action === undefined ? [] : [eq(auditLog.action, action)]),
    ...(subjectId === undefined ? [] : [eq(auditLog.subjectId, subjectId)]),
    ...(personId === undefined ? [] : [eq(auditLog.personId, personId)]),
    ...(markerId === undefined ? [] : [sql`not (${isOfBlindMarking(markerId)})`]),
  ];
}
