import type { Actor } from '../../../shared/policy/actor.ts';
import { write } from '../../db/transaction.ts';
import type { Deps } from '../../deps.ts';
import { insertLab } from '../../features/labs/labs.queries.ts';
import { selectUserByEmail, updateUser } from '../../features/people/people.queries.ts';
import type { NewAccount } from '../../features/people/accounts.service.ts';
import { demoEmail, demoLabs, demoPeople, type DemoLab, type DemoPersonKey } from './demo-people.ts';

const personKeys = Object.keys(demoPeople) as DemoPersonKey[];

export interface DemoActors {
  labIds: Record<DemoLab, string>;
  actor: (key: DemoPersonKey) => Actor;
}

export async function seedPeople(deps: Deps, password: string): Promise<DemoActors> {
  const passwordHash = await deps.hasher.hash(password);
  const labIds = Object.fromEntries(
    Object.entries(demoLabs).map(([key, name]) => [key, addLab(deps, name)]),
  ) as Record<DemoLab, string>;
  const ids = new Map(personKeys.map((key) => [key, addPerson(deps, key, passwordHash, labIds)]));
  return { labIds, actor: (key) => requireActor(deps, ids.get(key) ?? '') };
}

function addLab({ db, ids, clock }: Deps, name: string): string {
  const id = ids.next();
  write(db, (tx) => insertLab(tx, { id, name, createdAtMs: clock.nowMs() }));
  return id;
}

function addPerson(
  deps: Deps,
  key: DemoPersonKey,
  passwordHash: string,
  labIds: Record<DemoLab, string>,
): string {
  const person: { name: string; roles?: readonly string[]; labs?: readonly (readonly [DemoLab, string])[] } =
    demoPeople[key];
  const account = {
    email: demoEmail(key),
    name: person.name,
    passwordHash,
    roles: [...(person.roles ?? [])],
    memberships: (person.labs ?? []).map(([lab, role]) => ({ labId: labIds[lab], role })),
  } as NewAccount;
  return write(deps.db, (tx) => deps.services.accounts.create(tx, account));
}

function requireActor(deps: Deps, id: string): Actor {
  const actor = deps.services.actors.find(id);
  if (!actor) throw new Error(`The demo has no person ${id}.`);
  return actor;
}

/** The password may be another one than at the last start. */
export async function renewPasswords(deps: Deps, password: string): Promise<void> {
  const passwordHash = await deps.hasher.hash(password);
  write(deps.db, (tx) => {
    for (const key of personKeys) {
      const user = selectUserByEmail(tx, demoEmail(key));
      if (user) updateUser(tx, user.id, { passwordHash });
    }
  });
}
