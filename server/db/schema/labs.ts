import { sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { id, instantMs } from './columns.ts';

export const labs = sqliteTable('labs', {
  id: id(),
  name: text().notNull().unique(),
  createdAtMs: instantMs().notNull(),
});
