import type { z } from 'zod';
import type {
  auditPageSchema,
  auditRowSchema,
  listAuditQuerySchema,
} from '../../../shared/contract/audit.ts';
import { toTotal } from '../../../shared/contract/page.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Tx } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { decodeCursor, encodeCursor } from '../../http/cursor.ts';
import { toInstant } from '../../services/clock.ts';
import { firstPreviousHash, hashAuditRow } from './audit-hash.ts';
import {
  countAuditRows,
  insertAuditRow,
  selectAuditChain,
  selectAuditRows,
  selectLastAuditRow,
  type AuditRow,
} from './audit.queries.ts';

export interface AuditEntry {
  /** Nobody where the server itself acts. */
  personId: string | null;
  /** `<noun>.<verb in the past>`, for example `recording.cleared`. */
  action: string;
  subjectType: string;
  subjectId: string;
  labId?: string | null;
  detail?: Record<string, unknown>;
}

export type AuditService = ReturnType<typeof createAuditService>;

export function createAuditService({ db, clock, ids }: Pick<Ground, 'db' | 'clock' | 'ids'>) {
  /** Call in the transaction of the change. */
  function record(tx: Tx, entry: AuditEntry): void {
    const last = selectLastAuditRow(tx);
    const facts = {
      id: ids.next(),
      sequence: (last?.sequence ?? 0) + 1,
      atMs: clock.nowMs(),
      personId: entry.personId,
      action: entry.action,
      subjectType: entry.subjectType,
      subjectId: entry.subjectId,
      labId: entry.labId ?? null,
      // What is hashed is what will be read back.
      detail: toPlainJson(entry.detail ?? {}),
    };
    insertAuditRow(tx, { ...facts, hash: hashAuditRow(last?.hash ?? firstPreviousHash, facts) });
  }

  function list(actor: Actor, query: z.output<typeof listAuditQuerySchema>): z.input<typeof auditPageSchema> {
    authorize(actor, { action: 'read', name: 'Audit', row: { id: '' } });
    const beforeSequence = query.cursor === undefined ? null : decodeCursor(query.cursor, 'number');
    const filter = { ...query, markerId: actor.roles.includes('labeler') ? actor.id : undefined };
    const rows = selectAuditRows(db, filter, { beforeSequence, limit: query.limit + 1 });
    const shown = rows.slice(0, query.limit);
    const last = shown.at(-1);
    return {
      items: shown.map(({ row, personName }) => toAuditRow(row, personName)),
      nextCursor: rows.length > query.limit && last !== undefined ? encodeCursor(last.row.sequence) : null,
      total: toTotal(countAuditRows(db, filter)),
    };
  }

  /** Sequence of the first row that does not fit the chain, or `null` where all fit. */
  function findBrokenSequence(): number | null {
    let previousHash = firstPreviousHash;
    let sequence = 0;
    for (const row of selectAuditChain(db)) {
      sequence += 1;
      if (row.sequence !== sequence || row.hash !== hashAuditRow(previousHash, row)) return row.sequence;
      previousHash = row.hash;
    }
    return null;
  }

  return { record, list, findBrokenSequence };
}

function toAuditRow(row: AuditRow, personName: string | null): z.input<typeof auditRowSchema> {
  const { id, personId, action, subjectType, subjectId, labId, detail } = row;
  return { id, at: toInstant(row.atMs), personId, personName, action, subjectType, subjectId, labId, detail };
}

function toPlainJson(detail: Record<string, unknown>): Record<string, unknown> {
  return JSON.parse(JSON.stringify(detail)) as Record<string, unknown>;
}
