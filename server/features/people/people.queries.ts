import { and, asc, count, eq, gt, inArray, or, sql, type SQL } from 'drizzle-orm';
import type { LabRole, Membership, ServiceRole } from '../../../shared/contract/people.ts';
import type { Reader, Tx } from '../../db/client.ts';
import { prepared } from '../../db/prepared.ts';
import { labs } from '../../db/schema/labs.ts';
import { memberships, serviceRoles, users } from '../../db/schema/users.ts';

export type UserRow = typeof users.$inferSelect;
export interface NamedMembershipRow {
  userId: string;
  labId: string;
  labName: string;
  role: LabRole;
}

const userById = prepared((db) =>
  db
    .select()
    .from(users)
    .where(eq(users.id, sql.placeholder('id')))
    .prepare(),
);

export function selectUser(db: Reader, id: string): UserRow | undefined {
  return userById(db).get({ id });
}

export function selectUserByEmail(db: Reader, email: string): UserRow | undefined {
  return db.select().from(users).where(eq(users.email, email)).get();
}

export function countUsers(db: Reader): number {
  return db.select({ count: count() }).from(users).get()?.count ?? 0;
}

/** By name, then id; the key of a row is both. */
export function selectUsersPage(
  db: Reader,
  search: string,
  page: { afterKey: string | null; limit: number },
): UserRow[] {
  return db
    .select()
    .from(users)
    .where(and(matches(search), page.afterKey === null ? undefined : gt(userKey, page.afterKey)))
    .orderBy(asc(userKey))
    .limit(page.limit)
    .all();
}

const userKey = sql<string>`(lower(${users.name}) || char(0) || ${users.id})`;

export function keyOfUser(user: UserRow): string {
  // SQLite lowers ASCII letters only.
  return `${user.name.replace(/[A-Z]/g, (letter) => letter.toLowerCase())}\u0000${user.id}`;
}

export function countMatchingUsers(db: Reader, search: string): number {
  return db.select({ count: count() }).from(users).where(matches(search)).get()?.count ?? 0;
}

function matches(search: string): SQL | undefined {
  if (search === '') return undefined;
  const needle = search.toLowerCase();
  return or(sql`instr(lower(${users.name}), ${needle}) > 0`, sql`instr(${users.email}, ${needle}) > 0`);
}

export function selectRoles(db: Reader, userIds: readonly string[]) {
  return db
    .select()
    .from(serviceRoles)
    .where(inArray(serviceRoles.userId, [...userIds]))
    .all();
}

const membershipColumns = {
  userId: memberships.userId,
  labId: memberships.labId,
  labName: labs.name,
  role: memberships.role,
};

export function selectMemberships(db: Reader, userIds: readonly string[]): NamedMembershipRow[] {
  return db
    .select(membershipColumns)
    .from(memberships)
    .innerJoin(labs, eq(labs.id, memberships.labId))
    .where(inArray(memberships.userId, [...userIds]))
    .orderBy(asc(labs.name), asc(memberships.role))
    .all();
}

const rolesByUser = prepared((db) =>
  db
    .select({ role: serviceRoles.role })
    .from(serviceRoles)
    .where(eq(serviceRoles.userId, sql.placeholder('userId')))
    .prepare(),
);
const membershipsByUser = prepared((db) =>
  db
    .select(membershipColumns)
    .from(memberships)
    .innerJoin(labs, eq(labs.id, memberships.labId))
    .where(eq(memberships.userId, sql.placeholder('userId')))
    .orderBy(asc(labs.name), asc(memberships.role))
    .prepare(),
);

/** What one person may do, asked at every request. */
export function selectRights(db: Reader, userId: string) {
  return { roles: rolesByUser(db).all({ userId }), memberships: membershipsByUser(db).all({ userId }) };
}

export function selectEnabledByRole(db: Reader, role: ServiceRole): { id: string; name: string }[] {
  return db
    .select({ id: users.id, name: users.name })
    .from(users)
    .innerJoin(serviceRoles, eq(serviceRoles.userId, users.id))
    .where(and(eq(serviceRoles.role, role), eq(users.disabled, false)))
    .orderBy(asc(users.name), asc(users.id))
    .all();
}

export function insertUser(tx: Tx, user: UserRow): void {
  tx.insert(users).values(user).run();
}

export function updateUser(tx: Reader, id: string, values: Partial<Omit<UserRow, 'id'>>): void {
  tx.update(users).set(values).where(eq(users.id, id)).run();
}

export function replaceRoles(tx: Tx, userId: string, roles: readonly ServiceRole[]): void {
  tx.delete(serviceRoles).where(eq(serviceRoles.userId, userId)).run();
  const rows = [...new Set(roles)].map((role) => ({ userId, role }));
  if (rows.length > 0) tx.insert(serviceRoles).values(rows).run();
}

export function replaceMemberships(tx: Tx, userId: string, wanted: readonly Membership[]): void {
  tx.delete(memberships).where(eq(memberships.userId, userId)).run();
  const rows = wanted.map(({ labId, role }) => ({ userId, labId, role }));
  if (rows.length > 0) tx.insert(memberships).values(rows).onConflictDoNothing().run();
}
