import { and, count, desc, eq, lt, type SQL } from 'drizzle-orm';
import type { Reader, Tx } from '../../db/client.ts';
import { auditLog } from '../../db/schema/audit-log.ts';
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

function conditionsOf({ action, subjectId, personId }: AuditFilter): SQL[] {
  return [
    ...(action === undefined ? [] : [eq(auditLog.action, action)]),
    ...(subjectId === undefined ? [] : [eq(auditLog.subjectId, subjectId)]),
    ...(personId === undefined ? [] : [eq(auditLog.personId, personId)]),
  ];
}
