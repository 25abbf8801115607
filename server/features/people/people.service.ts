import type { z } from 'zod';
import { toTotal } from '../../../shared/contract/page.ts';
import type {
  listPeopleQuerySchema,
  peoplePageSchema,
  Person,
  personChoicesSchema,
  UpdatePerson,
} from '../../../shared/contract/people.ts';
import type { Actor } from '../../../shared/policy/actor.ts';
import { authorize } from '../../authorize/authorize.ts';
import type { Tx } from '../../db/client.ts';
import { write } from '../../db/transaction.ts';
import type { Ground } from '../../ground.ts';
import { decodeCursor, encodeCursor } from '../../http/cursor.ts';
import { conflict, forbidden, notFound } from '../../http/problem.ts';
import type { AuditService } from '../audit/audit.service.ts';
import type { LabsService } from '../labs/labs.service.ts';
import type { SessionsService } from '../sessions/sessions.service.ts';
import { toPeople } from './people.map.ts';
import {
  countMatchingUsers,
  keyOfUser,
  replaceMemberships,
  replaceRoles,
  selectEnabledByRole,
  selectMemberships,
  selectRoles,
  selectUser,
  selectUsersPage,
  updateUser,
  type UserRow,
} from './people.queries.ts';

export type PeopleService = ReturnType<typeof createPeopleService>;

interface Parts extends Pick<Ground, 'db'> {
  audit: AuditService;
  labs: LabsService;
  sessions: SessionsService;
}

export function createPeopleService({ db, audit, labs, sessions }: Parts) {
  function describe(reader: Parameters<typeof selectRoles>[0], rows: readonly UserRow[]): Person[] {
    const ids = rows.map(({ id }) => id);
    return toPeople(rows, selectRoles(reader, ids), selectMemberships(reader, ids));
  }

  function list(
    actor: Actor,
    query: z.output<typeof listPeopleQuerySchema>,
  ): z.input<typeof peoplePageSchema> {
    authorize(actor, { action: 'read', name: 'Person', row: { id: '' } });
    const search = query.q ?? '';
    const afterKey = query.cursor === undefined ? null : decodeCursor(query.cursor, 'string');
    const rows = selectUsersPage(db, search, { afterKey, limit: query.limit + 1 });
    const shown = rows.slice(0, query.limit);
    const last = shown.at(-1);
    return {
      items: describe(db, shown),
      nextCursor: rows.length > query.limit && last !== undefined ? encodeCursor(keyOfUser(last)) : null,
      total: toTotal(countMatchingUsers(db, search)),
    };
  }

  function get(actor: Actor, personId: string): Person {
    authorize(actor, { action: 'read', name: 'Person', row: { id: personId } });
    return describeOne(db, personId);
  }

  function describeOne(reader: Parameters<typeof selectRoles>[0], personId: string): Person {
    const user = selectUser(reader, personId);
    const [person] = user === undefined ? [] : describe(reader, [user]);
    if (person === undefined) throw notFound('This person');
    return person;
  }

  function update(actor: Actor, personId: string, input: UpdatePerson): Person {
    authorize(actor, { action: 'update', name: 'Person', row: { id: personId } });
    return write(db, (tx) => {
      const before = describeOne(tx, personId);
      labs.requireKnown(tx, input.memberships ?? []);
      applyUpdate(tx, personId, input);
      const after = describeOne(tx, personId);
      requireAdministrator(tx);
      if (after.disabled && !before.disabled) sessions.endAllOf(tx, personId);
      recordChanges(tx, actor, { before, after });
      return after;
    });
  }

  function recordChanges(tx: Tx, actor: Actor, { before, after }: { before: Person; after: Person }): void {
    const detail = differences(before, after);
    if (Object.keys(detail).length === 0) return;
    const subject = { subjectType: 'Person', subjectId: after.id };
    audit.record(tx, { personId: actor.id, action: 'person.changed', ...subject, detail });
  }

  /** Whom a curator may give a pass to: names only. */
  function listLabelers(actor: Actor): z.input<typeof personChoicesSchema> {
    const allowed = actor.roles.includes('curator') || actor.roles.includes('administrator');
    if (!allowed) throw forbidden('Curators choose who marks.');
    return { items: selectEnabledByRole(db, 'labeler') };
  }

  return { list, get, update, listLabelers };
}

function applyUpdate(tx: Tx, personId: string, input: UpdatePerson): void {
  const values = {
    ...(input.name === undefined ? {} : { name: input.name }),
    ...(input.disabled === undefined ? {} : { disabled: input.disabled }),
  };
  if (Object.keys(values).length > 0) updateUser(tx, personId, values);
  if (input.roles !== undefined) replaceRoles(tx, personId, input.roles);
  if (input.memberships !== undefined) replaceMemberships(tx, personId, input.memberships);
}

/** Asked after the change, inside its transaction: whatever way led there, it is undone. */
function requireAdministrator(tx: Tx): void {
  if (selectEnabledByRole(tx, 'administrator').length > 0) return;
  throw conflict('This is the last administrator: make somebody else one first.');
}

const watched = ['name', 'roles', 'memberships', 'disabled'] as const;

function differences(before: Person, after: Person): Record<string, { before: unknown; after: unknown }> {
  const changed = watched.filter((field) => JSON.stringify(before[field]) !== JSON.stringify(after[field]));
  return Object.fromEntries(changed.map((field) => [field, { before: before[field], after: after[field] }]));
}
