import type { ChangePassword } from '../../../shared/contract/sessions.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { invalidField } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { AccountsService } from '../people/accounts.service.ts';
import type { ActorsService } from '../people/actors.service.ts';
import { updateOthersEnded } from './sessions.queries.ts';

interface Parts extends Pick<Ground, 'db' | 'clock' | 'hasher'> {
  audit: AuditService;
  actors: ActorsService;
  accounts: AccountsService;
}

export type PasswordService = ReturnType<typeof createPasswordService>;

/** A person's own password. Whoever else is signed in with the old one is signed out. */
export function createPasswordService({ db, clock, hasher, audit, actors, accounts }: Parts) {
  async function change(actor: Actor, sessionId: string, input: ChangePassword): Promise<void> {
    const { email, name } = actors.requireFacts(actor.id);
    const isRight = await hasher.verify(
      actors.findCredentials(email)?.passwordHash ?? '',
      input.currentPassword,
    );
    if (!isRight) throw invalidField('currentPassword', 'is not your present password');
    const passwordHash = await accounts.hashNewPassword(input.newPassword, { email, name }, 'newPassword');
    write(db, (tx) => {
      accounts.setPasswordHash(tx, actor.id, passwordHash);
      updateOthersEnded(tx, { userId: actor.id, keptId: sessionId, nowMs: clock.nowMs() });
      audit.record(tx, {
        personId: actor.id,
        action: 'person.password-changed',
        subjectType: 'Person',
        subjectId: actor.id,
      });
    });
  }

  return { change };
}
