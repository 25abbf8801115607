import type { Person, ServiceRole } from '../../../shared/contract/people.ts';
import { toInstant } from '../../services/clock.ts';
import type { NamedMembershipRow, UserRow } from './people.queries.ts';

const roleOrder: readonly ServiceRole[] = ['labeler', 'curator', 'administrator'];

export function toPeople(
  rows: readonly UserRow[],
  roles: readonly { userId: string; role: ServiceRole }[],
  memberships: readonly NamedMembershipRow[],
): Person[] {
  return rows.map((row) => ({
    id: row.id,
    email: row.email,
    name: row.name,
    roles: roleOrder.filter((role) => roles.some((held) => held.userId === row.id && held.role === role)),
    memberships: memberships
      .filter(({ userId }) => userId === row.id)
      .map(({ labId, labName, role }) => ({ labId, labName, role })),
    disabled: row.disabled,
    createdAt: toInstant(row.createdAtMs),
    lastSeenAt: row.lastSeenAtMs === null ? null : toInstant(row.lastSeenAtMs),
  }));
}
