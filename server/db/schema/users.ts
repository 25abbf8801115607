import { index, integer, primaryKey, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import type { LabRole, Membership, ServiceRole } from '../../../shared/contract/people.ts';
import { id, instantMs } from './columns.ts';
import { labs } from './labs.ts';

export const users = sqliteTable('users', {
  id: id(),
  email: text().notNull().unique(),
  name: text().notNull(),
  passwordHash: text().notNull(),
  disabled: integer({ mode: 'boolean' }).notNull().default(false),
  createdAtMs: instantMs().notNull(),
  lastSeenAtMs: instantMs(),
});

export const serviceRoles = sqliteTable(
  'service_roles',
  {
    userId: text()
      .notNull()
      .references(() => users.id),
    role: text().$type<ServiceRole>().notNull(),
  },
  (table) => [primaryKey({ columns: [table.userId, table.role] })],
);

export const memberships = sqliteTable(
  'memberships',
  {
    userId: text()
      .notNull()
      .references(() => users.id),
    labId: text()
      .notNull()
      .references(() => labs.id),
    role: text().$type<LabRole>().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.userId, table.labId, table.role] }),
    index('memberships_lab_idx').on(table.labId),
  ],
);

export const invitations = sqliteTable('invitations', {
  id: id(),
  email: text().notNull(),
  tokenHash: text().notNull().unique(),
  roles: text({ mode: 'json' }).$type<ServiceRole[]>().notNull(),
  memberships: text({ mode: 'json' }).$type<Membership[]>().notNull(),
  invitedById: text()
    .notNull()
    .references(() => users.id),
  createdAtMs: instantMs().notNull(),
  expiresAtMs: instantMs().notNull(),
  acceptedAtMs: instantMs(),
});

/** The one-time link with which the first administrator is made. */
export const setupTokens = sqliteTable('setup_tokens', {
  id: id(),
  tokenHash: text().notNull().unique(),
  createdAtMs: instantMs().notNull(),
  expiresAtMs: instantMs().notNull(),
  usedAtMs: instantMs(),
});
