import { and, desc, eq, gt, isNull } from 'drizzle-orm';
import type { Reader, Tx } from '../../db/client.ts';
import { invitations, setupTokens } from '../../db/schema/users.ts';

export type InvitationRow = typeof invitations.$inferSelect;

export function selectOpenInvitations(db: Reader, nowMs: number): InvitationRow[] {
  return db
    .select()
    .from(invitations)
    .where(and(isNull(invitations.acceptedAtMs), gt(invitations.expiresAtMs, nowMs)))
    .orderBy(desc(invitations.createdAtMs))
    .all();
}

export function selectInvitation(db: Reader, id: string): InvitationRow | undefined {
  return db.select().from(invitations).where(eq(invitations.id, id)).get();
}

export function selectInvitationByHash(db: Reader, tokenHash: string): InvitationRow | undefined {
  return db.select().from(invitations).where(eq(invitations.tokenHash, tokenHash)).get();
}

export function insertInvitation(tx: Tx, invitation: InvitationRow): void {
  tx.insert(invitations).values(invitation).run();
}

export function deleteInvitation(tx: Tx, id: string): void {
  tx.delete(invitations).where(eq(invitations.id, id)).run();
}

export function deleteOpenInvitationsOf(tx: Tx, email: string): void {
  tx.delete(invitations)
    .where(and(eq(invitations.email, email), isNull(invitations.acceptedAtMs)))
    .run();
}

/** False where somebody else was faster. */
export function updateInvitationAccepted(tx: Tx, id: string, nowMs: number): boolean {
  const open = and(eq(invitations.id, id), isNull(invitations.acceptedAtMs));
  return tx.update(invitations).set({ acceptedAtMs: nowMs }).where(open).run().changes === 1;
}

export function replaceSetupToken(tx: Tx, row: typeof setupTokens.$inferInsert): void {
  tx.delete(setupTokens).run();
  tx.insert(setupTokens).values(row).run();
}

export function selectSetupTokenByHash(db: Reader, tokenHash: string) {
  return db.select().from(setupTokens).where(eq(setupTokens.tokenHash, tokenHash)).get();
}

export function updateSetupTokenUsed(tx: Tx, id: string, nowMs: number): boolean {
  const unused = and(eq(setupTokens.id, id), isNull(setupTokens.usedAtMs));
  return tx.update(setupTokens).set({ usedAtMs: nowMs }).where(unused).run().changes === 1;
}
