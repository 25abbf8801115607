import { index, integer, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { id, instantMs } from './columns.ts';

/** Append-only by trigger; each row carries the hash of the one before it and its own content. */
export const auditLog = sqliteTable(
  'audit_log',
  {
    id: id(),
    sequence: integer().notNull().unique(),
    atMs: instantMs().notNull(),
    personId: text(),
    action: text().notNull(),
    subjectType: text().notNull(),
    subjectId: text().notNull(),
    labId: text(),
    detail: text({ mode: 'json' }).$type<Record<string, unknown>>().notNull(),
    hash: text().notNull(),
  },
  (table) => [
    index('audit_log_subject_idx').on(table.subjectId),
    index('audit_log_person_idx').on(table.personId, table.sequence),
    index('audit_log_action_idx').on(table.action, table.sequence),
  ],
);
