import { index, integer, real, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { id, instantMs } from './columns.ts';

export const jobs = sqliteTable(
  'jobs',
  {
    id: id(),
    kind: text().notNull(),
    /** Ids only; parsed by the handler's schema. */
    payload: text({ mode: 'json' }).$type<Record<string, unknown>>().notNull(),
    state: text().$type<'queued' | 'running' | 'done' | 'parked'>().notNull(),
    attempts: integer().notNull().default(0),
    fence: integer().notNull().default(0),
    leaseUntilMs: instantMs(),
    runAfterMs: instantMs().notNull(),
    progress: real().notNull().default(0),
    error: text(),
    createdAtMs: instantMs().notNull(),
    updatedAtMs: instantMs().notNull(),
  },
  (table) => [index('jobs_next_idx').on(table.state, table.runAfterMs)],
);
