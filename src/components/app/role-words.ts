import type { LabRole, ServiceRole } from '@shared/contract/people.ts';

export const serviceRoleWords: Readonly<Record<ServiceRole, string>> = {
  labeler: 'labeler',
  curator: 'curator',
  administrator: 'administrator',
};

export const labRoleWords: Readonly<Record<LabRole, string>> = {
  contributor: 'contributor',
  reviewer: 'reviewer',
};

interface RoleHolder {
  roles: readonly ServiceRole[];
  memberships: readonly { labName: string; role: LabRole }[];
}

const ROLES_IN_A_LINE = 2;

/** The roles by name alone, each once: "contributor, reviewer". Everybody is at least a reader. */
export function rolesInShort(person: RoleHolder): string {
  const names = new Set<string>([
    ...person.roles.map((role) => serviceRoleWords[role]),
    ...person.memberships.map((membership) => labRoleWords[membership.role]),
  ]);
  if (names.size > ROLES_IN_A_LINE) return `${names.size} roles`;
  return names.size > 0 ? [...names].join(', ') : 'reader';
}

/** Every role with the lab it is held in. */
export function rolesInFull(person: RoleHolder): string[] {
  const inLabs = person.memberships.map(({ role, labName }) => `${labRoleWords[role]} at ${labName}`);
  const all = [...person.roles.map((role) => serviceRoleWords[role]), ...inLabs];
  return all.length > 0 ? all : ['reader of published releases'];
}
