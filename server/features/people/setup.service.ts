import type { z } from 'zod';
import type { setupSchema } from '../../../shared/contract/people.ts';
import type { Reader } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { createSecret, hashSecret } from '../../services/secret.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { AccountsService } from './accounts.service.ts';
import { replaceSetupToken, selectSetupTokenByHash, updateSetupTokenUsed } from './invitations.queries.ts';
import { linkUsed } from './one-time-link.ts';

const setupLifeMs = 24 * 60 * 60_000;

export type SetupService = ReturnType<typeof createSetupService>;

interface Parts extends Pick<Ground, 'config' | 'db' | 'clock' | 'ids'> {
  audit: AuditService;
  accounts: AccountsService;
}

/** The way in for the first administrator: there is no default account. */
export function createSetupService({ config, db, clock, ids, audit, accounts }: Parts) {
  /** While there is nobody, a new link at each start; it replaces the one before. */
  function createLink(): string | null {
    if (!accounts.hasNone(db)) return null;
    const token = createSecret();
    const now = clock.nowMs();
    const tokenHash = hashSecret(token);
    write(db, (tx) => {
      replaceSetupToken(tx, { id: ids.next(), tokenHash, createdAtMs: now, expiresAtMs: now + setupLifeMs });
    });
    return `${config.publicUrl}/setup?token=${token}`;
  }

  /** Returns the id of the administrator. */
  async function setUp({ token, name, email, password }: z.output<typeof setupSchema>): Promise<string> {
    requireUnused(db, token);
    const passwordHash = await accounts.hashNewPassword(password, { email, name });
    return write(db, (tx) => {
      const id = requireUnused(tx, token);
      if (!updateSetupTokenUsed(tx, id, clock.nowMs())) throw linkUsed();
      const roles = ['administrator' as const];
      const personId = accounts.create(tx, { email, name, passwordHash, roles, memberships: [] });
      const subject = { subjectType: 'Person', subjectId: personId };
      audit.record(tx, { personId, action: 'service.set-up', ...subject, detail: { email } });
      return personId;
    });
  }

  function requireUnused(reader: Reader, token: string): string {
    const found = selectSetupTokenByHash(reader, hashSecret(token));
    if (found === undefined) throw notFound('This link');
    const isOver = found.usedAtMs !== null || found.expiresAtMs <= clock.nowMs();
    if (isOver || !accounts.hasNone(reader)) throw linkUsed();
    return found.id;
  }

  return { createLink, setUp };
}
