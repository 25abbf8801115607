import { createHash } from 'node:crypto';

export interface HashedFacts {
  id: string;
  sequence: number;
  atMs: number;
  personId: string | null;
  action: string;
  subjectType: string;
  subjectId: string;
  labId: string | null;
  detail: Record<string, unknown>;
}

/** Each row's hash covers the one before it, so that a changed or missing row shows in every later hash. */
export function hashAuditRow(previousHash: string, facts: HashedFacts): string {
  const { id, sequence, atMs, personId, action, subjectType, subjectId, labId, detail } = facts;
  const content = JSON.stringify([
    id,
    sequence,
    atMs,
    personId,
    action,
    subjectType,
    subjectId,
    labId,
    detail,
  ]);
  return createHash('sha256').update(previousHash).update('\n').update(content).digest('hex');
}

export const firstPreviousHash = '0'.repeat(64);
