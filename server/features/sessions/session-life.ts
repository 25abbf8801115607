import type { SessionRow } from './sessions.queries.ts';

export const idleLimitMs = 12 * 60 * 60_000;
export const absoluteLimitMs = 7 * 24 * 60 * 60_000;

export function isAlive(session: SessionRow, personId: string, nowMs: number): boolean {
  return (
    session.userId === personId &&
    session.endedAtMs === null &&
    nowMs - session.lastSeenAtMs < idleLimitMs &&
    nowMs - session.createdAtMs < absoluteLimitMs
  );
}
