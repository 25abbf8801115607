import { and, desc, eq, gt, isNull, ne, sql } from 'drizzle-orm';
import type { Reader, Tx } from '../../db/client.ts';
import { prepared } from '../../db/prepared.ts';
import { apiTokens, sessions } from '../../db/schema/sessions.ts';

export type SessionRow = typeof sessions.$inferSelect;
export type TokenRow = typeof apiTokens.$inferSelect;

const sessionById = prepared((db) =>
  db
    .select()
    .from(sessions)
    .where(eq(sessions.id, sql.placeholder('id')))
    .prepare(),
);

export function selectSession(db: Reader, id: string): SessionRow | undefined {
  return sessionById(db).get({ id });
}

export function selectOpenSessionsOf(db: Reader, userId: string): SessionRow[] {
  return db
    .select()
    .from(sessions)
    .where(and(eq(sessions.userId, userId), isNull(sessions.endedAtMs)))
    .orderBy(desc(sessions.lastSeenAtMs))
    .all();
}

export function insertSession(tx: Tx, session: SessionRow): void {
  tx.insert(sessions).values(session).run();
}

export function updateSessionSeen(db: Reader, id: string, nowMs: number): void {
  db.update(sessions).set({ lastSeenAtMs: nowMs }).where(eq(sessions.id, id)).run();
}

/** False where it is not that person's, or has ended. */
export function updateSessionEnded(
  tx: Tx,
  { id, userId, nowMs }: { id: string; userId: string; nowMs: number },
): boolean {
  const open = and(eq(sessions.id, id), eq(sessions.userId, userId), isNull(sessions.endedAtMs));
  return tx.update(sessions).set({ endedAtMs: nowMs }).where(open).run().changes === 1;
}

export function updateAllEnded(tx: Tx, userId: string, nowMs: number): void {
  const openSessions = and(eq(sessions.userId, userId), isNull(sessions.endedAtMs));
  tx.update(sessions).set({ endedAtMs: nowMs }).where(openSessions).run();
  const openTokens = and(eq(apiTokens.userId, userId), isNull(apiTokens.revokedAtMs));
  tx.update(apiTokens).set({ revokedAtMs: nowMs }).where(openTokens).run();
}

/** Everywhere else; personal tokens stay. */
export function updateOthersEnded(
  tx: Tx,
  { userId, keptId, nowMs }: { userId: string; keptId: string; nowMs: number },
): void {
  const others = and(eq(sessions.userId, userId), ne(sessions.id, keptId), isNull(sessions.endedAtMs));
  tx.update(sessions).set({ endedAtMs: nowMs }).where(others).run();
}

export function selectTokenByHash(db: Reader, tokenHash: string): TokenRow | undefined {
  return db.select().from(apiTokens).where(eq(apiTokens.tokenHash, tokenHash)).get();
}

export function selectUsableTokensOf(db: Reader, userId: string, nowMs: number): TokenRow[] {
  return db
    .select()
    .from(apiTokens)
    .where(and(eq(apiTokens.userId, userId), isNull(apiTokens.revokedAtMs), gt(apiTokens.expiresAtMs, nowMs)))
    .orderBy(desc(apiTokens.createdAtMs))
    .all();
}

export function insertToken(tx: Tx, token: TokenRow): void {
  tx.insert(apiTokens).values(token).run();
}

export function updateTokenUsed(db: Reader, id: string, nowMs: number): void {
  db.update(apiTokens).set({ lastUsedAtMs: nowMs }).where(eq(apiTokens.id, id)).run();
}

export function updateTokenRevoked(
  tx: Tx,
  { id, userId, nowMs }: { id: string; userId: string; nowMs: number },
): boolean {
  const usable = and(eq(apiTokens.id, id), eq(apiTokens.userId, userId), isNull(apiTokens.revokedAtMs));
  return tx.update(apiTokens).set({ revokedAtMs: nowMs }).where(usable).run().changes === 1;
}
