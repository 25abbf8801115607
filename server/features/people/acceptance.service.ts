import type { z } from 'zod';
import type { acceptInvitationSchema, openInvitationSchema } from '../../../shared/contract/people.ts';
import type { Reader } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { notFound } from '../../http/problem.ts';
import { toInstant } from '../../services/clock.ts';
import { hashSecret } from '../../services/secret.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { AccountsService } from './accounts.service.ts';
import {
  selectInvitationByHash,
  updateInvitationAccepted,
  type InvitationRow,
} from './invitations.queries.ts';
import { linkUsed } from './one-time-link.ts';

export type AcceptanceService = ReturnType<typeof createAcceptanceService>;

interface Parts extends Pick<Ground, 'db' | 'clock'> {
  audit: AuditService;
  accounts: AccountsService;
}

/** What the holder of an invitation's link may do; the link is good once and not for long. */
export function createAcceptanceService({ db, clock, audit, accounts }: Parts) {
  function open(token: string): z.input<typeof openInvitationSchema> {
    const { email, expiresAtMs } = requireOpen(db, token);
    return { email, expiresAt: toInstant(expiresAtMs) };
  }

  /** Returns the id of the new person. */
  async function accept(token: string, input: z.output<typeof acceptInvitationSchema>): Promise<string> {
    const { name, password } = input;
    const { email } = requireOpen(db, token);
    const passwordHash = await accounts.hashNewPassword(password, { email, name });
    return write(db, (tx) => {
      const { id, roles, memberships } = requireOpen(tx, token);
      if (!updateInvitationAccepted(tx, id, clock.nowMs())) throw linkUsed();
      const personId = accounts.create(tx, { email, name, passwordHash, roles, memberships });
      const subject = { subjectType: 'Invitation', subjectId: id };
      audit.record(tx, { personId, action: 'invitation.accepted', ...subject, detail: { email } });
      return personId;
    });
  }

  function requireOpen(reader: Reader, token: string): InvitationRow {
    const found = selectInvitationByHash(reader, hashSecret(token));
    if (found === undefined) throw notFound('This invitation');
    if (found.acceptedAtMs !== null || found.expiresAtMs <= clock.nowMs()) throw linkUsed();
    return found;
  }

  return { open, accept };
}
