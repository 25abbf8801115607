import type { Membership, ServiceRole } from '../contract/people.ts';

/** Who asks. Read afresh from the database at each request. */
export interface Actor {
  id: string;
  name: string;
  roles: readonly ServiceRole[];
  memberships: readonly Membership[];
}

export function labsWhere(actor: Actor, role: Membership['role']): string[] {
  return actor.memberships
    .filter((membership) => membership.role === role)
    .map((membership) => membership.labId);
}

export function labsOf(actor: Actor): string[] {
  return [...new Set(actor.memberships.map((membership) => membership.labId))];
}
