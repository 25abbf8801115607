import type { CreateInvitation } from '../../../shared/contract/people.ts';
import type { Reader, Tx } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { ProblemError } from '../../http/problem.ts';
import { requireUncommonPassword } from './password-rules.ts';
import {
  countUsers,
  insertUser,
  replaceMemberships,
  replaceRoles,
  selectUserByEmail,
  updateUser,
} from './people.queries.ts';

export type AccountsService = ReturnType<typeof createAccountsService>;

export type NewAccount = Pick<CreateInvitation, 'email' | 'roles' | 'memberships'> & {
  name: string;
  passwordHash: string;
};

/** How an account comes to be; by which right, the caller has to know. */
export function createAccountsService({ clock, ids, hasher }: Pick<Ground, 'clock' | 'ids' | 'hasher'>) {
  /** Before the transaction, since hashing takes its time. */
  async function hashNewPassword(
    password: string,
    owner: { email: string; name: string },
    field = 'password',
  ): Promise<string> {
    requireUncommonPassword(password, owner, field);
    return hasher.hash(password);
  }

  function create(tx: Tx, { email, name, passwordHash, roles, memberships }: NewAccount): string {
    requireNewEmail(tx, email);
    const id = ids.next();
    const createdAtMs = clock.nowMs();
    insertUser(tx, { id, email, name, passwordHash, disabled: false, createdAtMs, lastSeenAtMs: null });
    replaceRoles(tx, id, roles);
    replaceMemberships(tx, id, memberships);
    return id;
  }

  function setPasswordHash(tx: Tx, personId: string, passwordHash: string): void {
    updateUser(tx, personId, { passwordHash });
  }

  return { hashNewPassword, create, setPasswordHash, hasNone: (reader: Reader) => countUsers(reader) === 0 };
}

export function requireNewEmail(reader: Reader, email: string): void {
  if (selectUserByEmail(reader, email) === undefined) return;
  throw new ProblemError('already-exists', `${email} has an account already.`, {
    fields: [{ path: 'email', message: 'has an account already' }],
  });
}
