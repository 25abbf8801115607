import type { Person } from '../../../shared/contract/people.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import type { Reader } from '../../db/client.ts';
import type { Ground } from '../../ground.ts';
import { selectRights, selectUser, selectUserByEmail, updateUser, type UserRow } from './people.queries.ts';

export type ActorsService = ReturnType<typeof createActorsService>;

/** Who a person is at this moment: read afresh at each request, so that a change acts at once. */
export function createActorsService({ db, clock }: Pick<Ground, 'db' | 'clock'>) {
  function find(personId: string): Actor | null {
    const user = selectUser(db, personId);
    if (user === undefined || user.disabled) return null;
    return { id: user.id, name: user.name, ...rightsOf(user) };
  }

  function rightsOf(user: UserRow): Pick<Person, 'roles' | 'memberships'> {
    const rights = selectRights(db, user.id);
    return {
      roles: rights.roles.map(({ role }) => role),
      memberships: rights.memberships.map(({ labId, labName, role }) => ({ labId, labName, role })),
    };
  }

  function findCredentials(email: string): { personId: string; passwordHash: string } | null {
    const user = selectUserByEmail(db, email);
    if (user === undefined || user.disabled) return null;
    return { personId: user.id, passwordHash: user.passwordHash };
  }

  /** Facts of somebody who exists, for the answer to "who am I". */
  function requireFacts(personId: string): Pick<Person, 'id' | 'email' | 'name' | 'roles' | 'memberships'> {
    const user = selectUser(db, personId);
    if (user === undefined) throw new RangeError(`There is no person ${personId}.`);
    return { id: user.id, email: user.email, name: user.name, ...rightsOf(user) };
  }

  function markSeen(tx: Reader, personId: string): void {
    updateUser(tx, personId, { lastSeenAtMs: clock.nowMs() });
  }

  return { find, findCredentials, requireFacts, markSeen };
}
