import { index, sqliteTable, text } from 'drizzle-orm/sqlite-core';
import { id, instantMs } from './columns.ts';
import { users } from './users.ts';

export const sessions = sqliteTable(
  'sessions',
  {
    id: id(),
    userId: text()
      .notNull()
      .references(() => users.id),
    userAgent: text().notNull(),
    createdAtMs: instantMs().notNull(),
    lastSeenAtMs: instantMs().notNull(),
    endedAtMs: instantMs(),
  },
  (table) => [index('sessions_user_idx').on(table.userId)],
);

export const apiTokens = sqliteTable(
  'api_tokens',
  {
    id: id(),
    userId: text()
      .notNull()
      .references(() => users.id),
    name: text().notNull(),
    tokenHash: text().notNull().unique(),
    createdAtMs: instantMs().notNull(),
    expiresAtMs: instantMs().notNull(),
    lastUsedAtMs: instantMs(),
    revokedAtMs: instantMs(),
  },
  (table) => [index('api_tokens_user_idx').on(table.userId)],
);
