import type { LabRole, ServiceRole } from '../../../shared/contract/people.ts';
import { insertLab } from '../../../server/features/labs/labs.queries.ts';
import {
  insertUser,
  replaceMemberships,
  replaceRoles,
  updateUser,
} from '../../../server/features/people/people.queries.ts';
import { write } from '../../../server/db/transaction.ts';
import type { Deps } from '../../../server/deps.ts';

/** Everybody who may ask, as the access matrix names them. */
export const actorNames = [
  'anonymous',
  'disabled',
  'labeler',
  'curator',
  'administrator',
  'contributor',
  'reviewer',
  'otherContributor',
  'removedMember',
  'foreignToken',
] as const;
export type ActorName = (typeof actorNames)[number];
export type PersonName = Exclude<ActorName, 'anonymous' | 'foreignToken'>;

export const testPassword = 'seven quiet lanterns drift';

export interface SeededActors {
  ownLabId: string;
  otherLabId: string;
  personIds: Record<PersonName, string>;
  /** Session cookies, all made while their person still had every right. */
  sessionTokens: Record<PersonName, string>;
}

interface Rights {
  roles?: ServiceRole[];
  own?: LabRole[];
  other?: LabRole[];
}

const rights: Record<PersonName, Rights> = {
  disabled: { roles: ['labeler', 'curator', 'administrator'], own: ['contributor', 'reviewer'] },
  labeler: { roles: ['labeler'] },
  curator: { roles: ['curator'] },
  administrator: { roles: ['administrator'] },
  contributor: { own: ['contributor'] },
  reviewer: { own: ['reviewer'] },
  otherContributor: { other: ['contributor'] },
  removedMember: { own: ['contributor', 'reviewer'] },
};

/** Two labs and one person of each kind; the disabled and the removed one lose their rights after signing in. */
export function seedActors(deps: Deps): SeededActors {
  const ownLabId = seedLab(deps, 'Northlight Solidification Lab');
  const otherLabId = seedLab(deps, 'Brineworks Institute');
  const personIds = mapPeople((name) =>
    seedPerson(deps, name, toMemberships(rights[name], ownLabId, otherLabId)),
  );
  const sessionTokens = mapPeople((name) => deps.services.sessions.start(personIds[name], 'test').token);
  write(deps.db, (tx) => {
    updateUser(tx, personIds.disabled, { disabled: true });
    replaceMemberships(tx, personIds.removedMember, []);
  });
  return { ownLabId, otherLabId, personIds, sessionTokens };
}

function seedLab({ db, ids, clock }: Deps, name: string): string {
  const id = ids.next();
  write(db, (tx) => insertLab(tx, { id, name, createdAtMs: clock.nowMs() }));
  return id;
}

type Memberships = { labId: string; role: LabRole }[];

function seedPerson({ db, ids, clock }: Deps, name: PersonName, memberships: Memberships): string {
  const id = ids.next();
  const email = `${name.toLowerCase()}@lab.example`;
  write(db, (tx) => {
    const user = { id, email, name: `Test ${name}`, passwordHash: 'none', disabled: false };
    insertUser(tx, { ...user, createdAtMs: clock.nowMs(), lastSeenAtMs: null });
    replaceRoles(tx, id, rights[name].roles ?? []);
    replaceMemberships(tx, id, memberships);
  });
  return id;
}

function toMemberships({ own = [], other = [] }: Rights, ownLabId: string, otherLabId: string): Memberships {
  return [
    ...own.map((role) => ({ labId: ownLabId, role })),
    ...other.map((role) => ({ labId: otherLabId, role })),
  ];
}

function mapPeople<Value>(make: (name: PersonName) => Value): Record<PersonName, Value> {
  const names = Object.keys(rights) as PersonName[];
  return Object.fromEntries(names.map((name) => [name, make(name)])) as Record<PersonName, Value>;
}
